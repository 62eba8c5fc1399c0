import { AffineRegistrar } from './icgn-affine.ts';
import { TranslationRegistrar } from './icgn-translation.ts';
import type { LumaImage } from './luma-image.ts';
import { type Deformation, UNDEFORMED } from './patch-sampler.ts';
import type { Registration } from './registration.ts';
import type { ScoreHistory } from './score-history.ts';
import type { Template } from './template.ts';

/** How a marker may change between frames: only move, or also turn, stretch and shear. */
export type MotionModel = 'translation' | 'affine';

// A soft texture hides a turn from the score: 2 degrees cost it 0.006, and move a 41 px patch by 0.15 px. So every twelfth
// frame is registered with the affine warp as well, at the start and after one that showed a turn every frame.
const PROBE_EVERY = 12;
const ALERT_FRAMES = 8;
const ALERT_AT_START = 16;
// This many frames that showed a turn settle the matter.
const TURNS_TO_SWITCH = 3;
// Deformation that moves the patch's corners by less than this is no more than noise or compression, px. Strong
// compression wobbles soft textures by as much; the affine warp then costs a tenth of precision and does no harm.
const LEAST_CORNER_PX = 0.25;
// Four more parameters lower the residual a little even without a turn: an F statistic of 1, of 4 once in 300 frames.
// Compression errors are not white, hence the distance.
const LEAST_F = 20;
// Smoothing by [1 2 1] twice over makes this many neighbouring pixels worth one (sum of squared autocorrelations).
const PIXELS_PER_INDEPENDENT = 3.78;
// A turn explains all that the translation lacks; a partly covered marker stays below.
const RECOVERED_WITHIN = 0.02;
// Below this score a translation has not found the marker, and there is nothing to recover.
const LEAST_TO_RECOVER = 0.3;

/**
 * Registers by translation as long as that explains the frames, and by an affine warp once it is seen that the part turns:
 * when the affine warp leaves significantly less residual, deforms the patch visibly, and brings the score to what is
 * usual. Or by the one model it is told.
 */
export class AdaptiveRegistrar {
  private current: MotionModel;
  private frames = 0;
  private alertFrames = ALERT_AT_START;
  private turns = 0;
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
    this.frames++;
    if (this.alertFrames > 0) this.alertFrames--;
    if (!moved.converged || moved.score < LEAST_TO_RECOVER) return false;
    return moved.score < history.limit || this.alertFrames > 0 || this.frames % PROBE_EVERY === 1;
  }

  private probe(image: LumaImage, moved: Registration, history: ScoreHistory): Registration {
    const affine = this.affineRegistrar();
    affine.startFrom(UNDEFORMED);
    const turned = affine.register(image, moved.x, moved.y);
    if (!turned.converged || turned.score < history.usual - RECOVERED_WITHIN) return moved;
    if (this.improvement(moved.score, turned.score) < LEAST_F || this.cornerPx() < LEAST_CORNER_PX)
      return moved;
    this.turns++;
    this.alertFrames = ALERT_FRAMES;
    if (this.turns >= TURNS_TO_SWITCH) this.current = 'affine';
    this.used = 'affine';
    return turned;
  }

  /** F statistic of the four parameters that the affine warp has more. */
  private improvement(movedScore: number, turnedScore: number): number {
    const { widthPx, heightPx, smoothed } = this.template;
    const pixels = (widthPx * heightPx) / (smoothed ? PIXELS_PER_INDEPENDENT : 1);
    const left = Math.max(1e-9, 1 - turnedScore * turnedScore);
    return ((turnedScore * turnedScore - movedScore * movedScore) / 4) * (pixels / left);
  }

  /** How far the deformation moves the corners of the patch, px. */
  private cornerPx(): number {
    const { xx, xy, yx, yy } = this.affineRegistrar().deformation;
    const halfX = this.template.widthPx / 2;
    const halfY = this.template.heightPx / 2;
    return Math.hypot(
      halfX * Math.abs(xx) + halfY * Math.abs(xy),
      halfX * Math.abs(yx) + halfY * Math.abs(yy),
    );
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
