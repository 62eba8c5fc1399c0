import { AffineRegistrar } from './icgn-affine.ts';
import { TranslationRegistrar } from './icgn-translation.ts';
import type { LumaImage } from './luma-image.ts';
import { type Deformation, UNDEFORMED } from './patch-sampler.ts';
import type { Registration } from './registration.ts';
import type { ScoreHistory } from './score-history.ts';
import type { Template } from './template.ts';

/** How a marker may change between frames: only move, or also turn, stretch and shear. */
export type MotionModel = 'translation' | 'affine';

// A turn by 0.7 degrees costs a 41 px patch of fine texture 0.01 of its score, and some hundredths of a pixel.
const PROBE_DROP = 0.01;
// Half of the frames that dropped a little are tried with the affine warp as well: the time is spent only there.
const PROBE_EVERY = 2;
// Four more parameters raise the score of pure noise by about a thousandth.
const LEAST_RISE = 0.005;
// This many frames that the affine warp recovered settle the matter.
const RECOVERIES_TO_SWITCH = 3;
// Below this score a translation has not found the marker, and there is nothing to recover.
const LEAST_TO_RECOVER = 0.3;

/**
 * Registers by translation as long as that explains the frames, and by an affine warp once it is seen that the part turns:
 * when the score of the translation falls and the affine warp brings it back. Or by the one model it is told.
 */
export class AdaptiveRegistrar {
  private current: MotionModel;
  private recoveries = 0;
  private dropped = 0;
  private readonly translation: TranslationRegistrar;
  private affine: AffineRegistrar | null = null;
  private used: MotionModel = 'translation';

  constructor(
    private readonly template: Template,
    private readonly wanted: MotionModel | 'auto',
  ) {
    this.translation = new TranslationRegistrar(template);
    this.current = wanted === 'affine' ? 'affine' : 'translation';
  }

  /** The model that new frames are registered with. */
  get model(): MotionModel {
    return this.current;
  }

  /** The model of the registration returned last. */
  get lastModel(): MotionModel {
    return this.used;
  }

  /** The deformation of the registration returned last. */
  get deformation(): Deformation {
    return this.used === 'affine' && this.affine ? this.affine.deformation : UNDEFORMED;
  }

  /**
   * Looks for the marked point near (x, y), in pixels of the image.
   *
   * @returns a result that the next call overwrites
   */
  register(image: LumaImage, x: number, y: number, history: ScoreHistory): Registration {
    if (this.current === 'affine') {
      const turned = this.affineRegistrar().register(image, x, y);
      this.used = 'affine';
      if (turned.converged) return turned;
    }
    const moved = this.translation.register(image, x, y);
    this.used = 'translation';
    if (this.current === 'affine' && moved.converged) return this.startAffineFrom(image, moved);
    if (this.wanted !== 'auto' || !this.worthProbing(moved, history)) return moved;
    return this.probe(image, moved, history);
  }

  private worthProbing(moved: Registration, history: ScoreHistory): boolean {
    if (!moved.converged || moved.score < LEAST_TO_RECOVER) return false;
    if (moved.score < history.limit) return true;
    if (moved.score > history.usual - PROBE_DROP) return false;
    this.dropped++;
    return this.dropped % PROBE_EVERY === 0;
  }

  private probe(image: LumaImage, moved: Registration, history: ScoreHistory): Registration {
    const turned = this.affineRegistrar().register(image, moved.x, moved.y);
    const rise = turned.score - moved.score;
    const recovered =
      turned.converged &&
      turned.score >= history.limit &&
      rise > LEAST_RISE &&
      rise > 0.5 * (history.usual - moved.score);
    if (!recovered) return moved;
    this.recoveries++;
    if (this.recoveries >= RECOVERIES_TO_SWITCH) this.current = 'affine';
    this.used = 'affine';
    return turned;
  }

  /** The affine warp did not find its way from the start; from where the translation ended it may. */
  private startAffineFrom(image: LumaImage, moved: Registration): Registration {
    const turned = this.affineRegistrar().register(image, moved.x, moved.y);
    if (!turned.converged || turned.score < moved.score) return moved;
    this.used = 'affine';
    return turned;
  }

  private affineRegistrar(): AffineRegistrar {
    this.affine ??= new AffineRegistrar(this.template);
    return this.affine;
  }
}
