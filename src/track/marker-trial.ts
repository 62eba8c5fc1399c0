import { AdaptiveRegistrar, type MotionModel } from './adaptive-registrar.ts';
import { believe } from './believe.ts';
import { BlurRecovery, type BlurredFit } from './blur-recovery.ts';
import { distance, type Point } from './find-again.ts';
import { type Region, roomPx } from './region.ts';
import type { Registration } from './registration.ts';
import { RegistrationUncertainty } from './registration-uncertainty.ts';
import type { ScoreHistory } from './score-history.ts';
import type { Template } from './template.ts';
import type { TrackReason } from './track-step.ts';

// A marker smeared by half its patch scores this much with a sharp template.
const LEAST_SMEARED_SCORE = 0.3;

/** What the tracker knows when it tries a place. */
export interface TrialCircumstances {
  /** The last known place, coded frame. */
  readonly held: Point | null;
  readonly wasLost: boolean;
  /** The largest step between frames of late, px. */
  readonly largestStepPx: number;
}

/** A registration at (x, y) of the coded frame, and whether it is taken for the marker. */
export interface TrialOutcome extends Point {
  readonly believed: boolean;
  /** Why it is doubtful, or refused. */
  readonly reason: TrackReason | null;
  /** Valid until the next trial. */
  readonly registration: Registration;
  readonly blurPx: number;
  readonly uncertainty: RegistrationUncertainty;
}

/** Registers a marker from an expected place, sharp or smeared, moved or turned, and judges the outcome. */
export class MarkerTrial {
  readonly registrar: AdaptiveRegistrar;
  private readonly blur: BlurRecovery;
  private readonly uncertainties = new Map<MotionModel, RegistrationUncertainty>();

  /** @throws Error where the template has no texture in two directions (`judgeSpot` says so beforehand) */
  constructor(
    private readonly template: Template,
    model: MotionModel | 'auto',
    private readonly history: ScoreHistory,
  ) {
    this.registrar = new AdaptiveRegistrar(template, model);
    this.blur = new BlurRecovery(template);
  }

  /** Tries a place of the coded frame. */
  at(region: Region, expected: Point, circumstances: TrialCircumstances): TrialOutcome {
    const { template, history } = this;
    const { image, offsetX, offsetY } = region;
    const sharp = this.registrar.register(image, expected.x - offsetX, expected.y - offsetY, history);
    const smeared = this.trySmeared(region, sharp, circumstances);
    const registration = smeared?.registration ?? sharp;
    const place = { x: registration.x + offsetX, y: registration.y + offsetY };
    const belief = believe(registration, history.limit, {
      surprisePx: distance(place, expected),
      roomPx: roomPx(region, template, place.x, place.y),
      largestStepPx: circumstances.largestStepPx,
      patchPx: Math.min(template.widthPx, template.heightPx),
      alias: template.alias,
      wasLost: circumstances.wasLost,
    });
    const uncertainty = smeared?.uncertainty ?? this.uncertaintyOf(this.registrar.lastModel);
    return { ...belief, ...place, registration, blurPx: smeared?.blurPx ?? 0, uncertainty };
  }

  /** A low score may be that of a marker smeared by its motion. Of one that turns it has other reasons. */
  private trySmeared(
    { image, offsetX, offsetY }: Region,
    sharp: Registration,
    { held, wasLost }: TrialCircumstances,
  ): BlurredFit | null {
    const { limit } = this.history;
    const low = sharp.converged && sharp.score < limit && sharp.score > LEAST_SMEARED_SCORE;
    if (!low || !held || wasLost || this.registrar.lastModel !== 'translation') return null;
    const [stepX, stepY] = [sharp.x + offsetX - held.x, sharp.y + offsetY - held.y];
    return this.blur.recover(image, sharp.x, sharp.y, stepX, stepY, limit);
  }

  private uncertaintyOf(model: MotionModel): RegistrationUncertainty {
    let uncertainty = this.uncertainties.get(model);
    if (!uncertainty) {
      uncertainty = new RegistrationUncertainty(this.template, model === 'affine' ? 6 : 2);
      this.uncertainties.set(model, uncertainty);
    }
    return uncertainty;
  }
}
