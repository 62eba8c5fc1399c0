import type { MotionModel } from './adaptive-registrar.ts';
import { chooseFit, distance, type Point, SearchPlan } from './find-again.ts';
import type { LumaImage } from './luma-image.ts';
import { MarkerTrial, type TrialOutcome } from './marker-trial.ts';
import type { Deformation } from './patch-sampler.ts';
import { expectedScore } from './patch-texture.ts';
import { Predictor } from './predictor.ts';
import { type Region, roomPx } from './region.ts';
import { ScoreHistory } from './score-history.ts';
import { searchCoarsely } from './search-image.ts';
import type { Template } from './template.ts';
import type { FoundTemplate, TemplateSearch } from './template-search.ts';
import type { LostStep, MeasuredStep, TrackReason, TrackStep } from './track-step.ts';
import { Travel, type TravelBox } from './travel.ts';

// While a marker is tracked elsewhere, it is looked for this often, in frames, in the range it was trusted in.
const LOOK_HOME_EVERY = 10;
// A region should have room for two more steps, and for what patch and prediction need.
const ROOM_PX = 6;
const ROOM_STEPS = 2;

/** How a marker is tracked. */
export interface MarkerTrackerOptions {
  /** Where the marked point is in the first frame, within 4 px, coded frame; sought in the region when not given. */
  readonly start?: Point;
  /** 'auto', which changes from translation to affine when the part is seen to turn, unless said. */
  readonly model?: MotionModel | 'auto';
  /** How to find a marker that is not where it should be; `searchCoarsely` unless said. */
  readonly search?: TemplateSearch;
}

/**
 * Follows one marker from frame to frame: predicts its place, registers its template there, and judges the outcome.
 * The template stays the same, so nothing drifts. A marker that is covered or gone is lost, which is a gap and never
 * an estimated place; it is sought again where it was last seen, then in the region. Frames may be given forwards or
 * backwards in time. Positions are in pixels of the coded frame.
 */
export class MarkerTracker {
  private readonly trial: MarkerTrial;
  private readonly history: ScoreHistory;
  private readonly predictor = new Predictor();
  private readonly travelled = new Travel();
  private readonly search: TemplateSearch;
  private readonly plan: SearchPlan;
  private readonly patchPx: number;
  private held: Point | null;
  private lostFrames = 0;
  private frames = 0;
  // A doubt that later frames cannot settle by themselves.
  private doubt: TrackReason | null = null;
  private found: FoundTemplate | null = null;
  // The best of what was refused in this frame.
  private refusal: TrackReason = 'covered';
  private bestRefused = -1;

  /** @throws Error where the template has no texture in two directions (`judgeSpot` says so beforehand) */
  constructor(
    private readonly template: Template,
    options: MarkerTrackerOptions = {},
  ) {
    this.history = new ScoreHistory(expectedScore(template));
    this.trial = new MarkerTrial(template, options.model ?? 'auto', this.history);
    this.search = options.search ?? searchCoarsely;
    this.patchPx = Math.min(template.widthPx, template.heightPx);
    this.plan = new SearchPlan(this.patchPx);
    this.held = options.start ? { x: options.start.x, y: options.start.y } : null;
  }

  /** The motion model in use; it changes from translation to affine at most once. */
  get model(): MotionModel {
    return this.trial.registrar.model;
  }

  /** How the marker was deformed in the last measured frame. */
  get deformation(): Deformation {
    return this.trial.registrar.deformation;
  }

  /** The last known place; null before the first. A place to look at, not a measurement. */
  get lastKnown(): Point | null {
    return this.held;
  }

  /** The range of the trusted positions so far; null before the first. */
  get travel(): TravelBox | null {
    return this.travelled.box;
  }

  /** What the last search found, coded frame; null when none was needed or it found nothing. */
  get lastSearch(): FoundTemplate | null {
    return this.found;
  }

  /**
   * Looks for the marker in the next frame.
   *
   * @param image the frame, or the region of it that the marker should be in
   * @param offsetX, offsetY the coded frame's pixel at the image's upper left corner
   * @param timeS the frame's time, true seconds
   */
  step(image: LumaImage, offsetX: number, offsetY: number, timeS: number): TrackStep {
    const region = { image, offsetX, offsetY };
    this.frames++;
    this.refusal = 'covered';
    this.bestRefused = -1;
    const accepted = this.lookHome(region) ?? this.lookWhereExpected(region, timeS);
    return accepted ? this.keep(region, timeS, accepted) : this.lose(region);
  }

  private lookWhereExpected(region: Region, timeS: number): TrialOutcome | null {
    const { held } = this;
    const expected = this.lostFrames > 0 ? held : (this.predictor.predict(timeS) ?? held);
    if (!expected || !held) return this.trySearch(region, null);
    return (
      this.tryAt(region, expected) ??
      (distance(expected, held) > 1 ? this.tryAt(region, held) : null) ??
      this.trySearch(region, expected)
    );
  }

  /** A marker that is tracked elsewhere may be a look-alike, and the marker itself back in its place. */
  private lookHome(region: Region): TrialOutcome | null {
    const { box, extentPx } = this.travelled;
    if (this.doubt !== 'found-elsewhere' || !box || this.frames % LOOK_HOME_EVERY !== 0) return null;
    const home = { x: (box.minX + box.maxX) / 2, y: (box.minY + box.maxY) / 2 };
    const near = {
      x: home.x - region.offsetX,
      y: home.y - region.offsetY,
      radiusPx: extentPx + this.patchPx / 2,
    };
    const found = this.search(region.image, this.template, { minScore: this.history.limit, near });
    if (!found || found.ambiguous) return null;
    const accepted = this.tryAt(region, inCodedFrame(found, region));
    if (accepted) this.predictor.clear();
    return accepted;
  }

  /** Registers from an expected place; null where what is there is not taken for the marker. */
  private tryAt(region: Region, expected: Point): TrialOutcome | null {
    const outcome = this.trial.at(region, expected, {
      held: this.held,
      wasLost: this.lostFrames > 0,
      largestStepPx: this.predictor.largestStepPx(),
    });
    if (outcome.believed) return outcome;
    this.refuse(outcome.reason ?? 'covered', outcome.registration.score);
    return null;
  }

  /** Searches the region, near where the marker was expected unless it is time to look through all of it. */
  private trySearch(region: Region, expected: Point | null): TrialOutcome | null {
    const { image, offsetX, offsetY } = region;
    const { history, travelled } = this;
    // A start that was given and never confirmed is a hint, not a place to stay near.
    const last = travelled.box ? expected : null;
    const near = this.plan.near(last, this.lostFrames, travelled.extentPx, this.predictor.largestStepPx());
    const found = this.search(image, this.template, {
      minScore: this.plan.leastScore(history.usual, last !== null),
      ...(near && { near: { x: near.x - offsetX, y: near.y - offsetY, radiusPx: near.radiusPx } }),
    });
    this.found = found && inCodedFrame(found, region);
    if (!this.found) return null;
    // A moving part is easily a patch further on; after a loss a look-alike is likelier than that.
    const slackPx = this.lostFrames > 0 ? this.patchPx / 2 : this.patchPx;
    const isPlausible = ({ x, y }: Point): boolean => travelled.allows(x, y, slackPx);
    const chosen = chooseFit(this.found, expected, isPlausible);
    if (!chosen) {
      this.refuse('ambiguous', this.found.score);
      return null;
    }
    const elsewhere = !isPlausible(chosen.fit);
    if (elsewhere && chosen.fit.score < history.limit) {
      this.refuse('covered', chosen.fit.score);
      return null;
    }
    const accepted = this.tryAt(region, chosen.fit);
    if (accepted && chosen.ambiguous) this.doubt = 'ambiguous';
    else if (accepted && elsewhere) this.doubt ??= 'found-elsewhere';
    return accepted;
  }

  private refuse(reason: TrackReason, score: number): void {
    if (score <= this.bestRefused) return;
    this.bestRefused = score;
    this.refusal = reason;
  }

  /** Remembers a measured frame. */
  private keep(region: Region, timeS: number, accepted: TrialOutcome): MeasuredStep {
    const { registration, x, y } = accepted;
    if (this.lostFrames > 0) this.predictor.clear();
    this.lostFrames = 0;
    this.held = { x, y };
    this.predictor.push(timeS, x, y);
    this.history.push(registration.score);
    if (accepted.reason === 'alias-jump') this.doubt ??= 'alias-jump';
    if (this.doubt === 'found-elsewhere' && this.travelled.allows(x, y, 0)) this.doubt = null;
    const reason = accepted.reason ?? this.doubt;
    if (reason === null) this.travelled.include(x, y);

    const covariance = accepted.uncertainty.ofRegistration(registration);
    const room = roomPx(region, this.template, x, y);
    return {
      state: reason === null ? 'ok' : 'doubtful',
      x,
      y,
      score: registration.score,
      uPx: covariance && Math.sqrt((covariance.xx + covariance.yy) / 2),
      uXPx: covariance && Math.sqrt(covariance.xx),
      uYPx: covariance && Math.sqrt(covariance.yy),
      reason,
      blurPx: accepted.blurPx,
      roomPx: room,
      nearBorder: this.isNearBorder(room),
    };
  }

  /** Remembers that the marker was not found; its last place is held, not extended. */
  private lose(region: Region): LostStep {
    this.lostFrames++;
    const room = this.held && roomPx(region, this.template, this.held.x, this.held.y);
    return {
      state: 'lost',
      x: null,
      y: null,
      score: this.bestRefused,
      uPx: null,
      uXPx: null,
      uYPx: null,
      reason: this.refusal,
      roomPx: room,
      nearBorder: room !== null && (this.refusal === 'at-border' || this.isNearBorder(room)),
    };
  }

  private isNearBorder(room: number): boolean {
    return room < ROOM_PX + ROOM_STEPS * this.predictor.largestStepPx();
  }
}

function inCodedFrame(found: FoundTemplate, { offsetX, offsetY }: Region): FoundTemplate {
  const { second } = found;
  return {
    ...found,
    x: found.x + offsetX,
    y: found.y + offsetY,
    second: second && { x: second.x + offsetX, y: second.y + offsetY, score: second.score },
  };
}
