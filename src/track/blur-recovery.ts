import { blurTemplate } from './blurred-template.ts';
import { TranslationRegistrar } from './icgn-translation.ts';
import type { LumaImage } from './luma-image.ts';
import type { Registration } from './registration.ts';
import { RegistrationUncertainty } from './registration-uncertainty.ts';
import type { Template } from './template.ts';

// A shutter is open for some share of the frame interval; these are tried, the likeliest of phones first. The last is for
// an open shutter while the marker gains speed.
const SHUTTER_SHARES = [0.5, 1, 0.25, 0.75, 1.25] as const;
// Shorter smears hardly lower the score.
const SHORTEST_PX = 1.5;
// Smears are told apart by 1 px and 1/16 of a half turn; what is made for one is kept for the next frames.
const LENGTH_STEP_PX = 1;
const DIRECTION_STEP_RAD = Math.PI / 16;
const MOST_KEPT = 64;

/** A registration of a smeared marker. The registration is overwritten by the next call. */
export interface BlurredFit {
  readonly registration: Registration;
  readonly blurPx: number;
  readonly uncertainty: RegistrationUncertainty;
}

/**
 * Registers a marker that moves so fast that it is smeared: against the template smeared likewise. A frame whose score
 * comes back by this is no worse than others; one with a covered marker stays low.
 */
export class BlurRecovery {
  private readonly kept = new Map<
    string,
    Omit<BlurredFit, 'registration'> & { registrar: TranslationRegistrar }
  >();

  constructor(private readonly template: Template) {}

  /**
   * Looks for the smeared marker near (x, y), in pixels of the image.
   *
   * @param stepX, stepY how far it moved since the frame before, px
   * @param leastScore the score that ends the trials, and the least that is returned
   * @returns null where no smear along the motion brings the score up to `leastScore`
   */
  recover(
    image: LumaImage,
    x: number,
    y: number,
    stepX: number,
    stepY: number,
    leastScore: number,
  ): BlurredFit | null {
    const speed = Math.sqrt(stepX * stepX + stepY * stepY);
    for (const share of SHUTTER_SHARES) {
      const length = LENGTH_STEP_PX * Math.round((share * speed) / LENGTH_STEP_PX);
      if (length < SHORTEST_PX) continue;
      const entry = this.smeared(length, Math.atan2(stepY, stepX));
      if (!entry) continue;
      const registration = entry.registrar.register(image, x, y);
      if (registration.converged && registration.score >= leastScore) return { ...entry, registration };
    }
    return null;
  }

  private smeared(blurPx: number, directionRad: number) {
    // A smear has no sense of direction: half a turn makes no difference.
    const step = Math.round(directionRad / DIRECTION_STEP_RAD);
    const turn = ((step % 16) + 16) % 16;
    const key = `${blurPx} ${turn}`;
    const kept = this.kept.get(key);
    if (kept) return kept;
    const template = blurTemplate(this.template, blurPx, turn * DIRECTION_STEP_RAD);
    if (!template) return null;
    if (this.kept.size >= MOST_KEPT) this.kept.clear();
    const entry = {
      blurPx,
      registrar: new TranslationRegistrar(template),
      uncertainty: new RegistrationUncertainty(template, 2),
    };
    this.kept.set(key, entry);
    return entry;
  }
}
