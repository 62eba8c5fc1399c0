import { clippedFraction } from './clipping.ts';
import { cutTemplate, noiseArea } from './cut-template.ts';
import { imageNoiseDn } from './image-noise.ts';
import type { LumaImage } from './luma-image.ts';
import { type PatchTexture, patchTexture } from './patch-texture.ts';
import { listFits } from './search-image.ts';
import type { Alias, SpotJudgement, Template } from './template.ts';

// Sizes tried where none is given; smaller ones are too easily mistaken, larger ones seldom fit on the part.
const SIZES_PX = [31, 41, 51, 61, 81, 101, 121] as const;
// Tried where none of them fits between the spot and the edge of the picture.
const SIZE_AT_EDGE_PX = 21;
const SMALLEST_PX = 15;
const LARGEST_PX = 121;
// Compressed video has little noise left, but errors that move it as noise of some DN would; sizes are chosen for that.
const LEAST_NOISE_TO_CHOOSE_BY_DN = 2;
// Compression leaves errors of 0.01 to 0.03 px whatever the patch: a patch larger than for 0.01 px gains nothing.
// Large patches reach beyond the part sooner, so they are taken only for the sake of a greater need.
const AIMS = [
  { uPx: 0.01, largestPx: 61 },
  { uPx: 0.02, largestPx: LARGEST_PX },
  { uPx: 0.05, largestPx: LARGEST_PX },
  { uPx: Number.POSITIVE_INFINITY, largestPx: LARGEST_PX },
] as const;
// A tenth of a pixel in one frame is where amplitudes worth measuring end.
const WORST_U_PX = 0.1;
// Below this contrast, what a compressed video shows is the work of its encoder. DN of 255.
const LEAST_CONTRAST_DN = 3;
// An edge that is clipped moves with the light; with half of the patch clipped little else is left.
const MOST_CLIPPED = 0.5;
const MUCH_CLIPPED = 0.05;
// A place this alike becomes as good as the marker with a little blur or change of light.
const ALIKE_SCORE = 0.8;
const DEFAULT_TRAVEL_PX = 48;
const CLOSE_BY_PX = 20;

/** What a judgement is told. */
export interface JudgeOptions {
  /** Side of the patch, odd, 15 to 121; chosen from the texture where not given. */
  readonly sizePx?: number;
  /** How far from the spot the marker may move, px: look-alikes are sought there. 48 unless said. */
  readonly travelPx?: number;
}

/** A spot judged, with the template that belongs to it where it can be tracked. */
export interface ChosenTemplate {
  readonly judgement: SpotJudgement;
  /** Null where the spot is refused; `judgement.reason` says why. */
  readonly template: Template | null;
}

/**
 * Judges the spot round (x, y) of an image for tracking: size of the patch, expected uncertainty from the noise and
 * the gradients, clipping, look-alikes. Refuses spots with too little texture, with texture along one direction
 * only, clipped ones and those too near the edge.
 */
export function judgeSpot(image: LumaImage, x: number, y: number, options: JudgeOptions = {}): SpotJudgement {
  return chooseTemplate(image, x, y, options).judgement;
}

/**
 * Judges a spot as `judgeSpot` does, and cuts its template.
 *
 * @throws Error for a size that is even or out of range
 */
export function chooseTemplate(
  image: LumaImage,
  x: number,
  y: number,
  options: JudgeOptions = {},
): ChosenTemplate {
  const { sizePx: given, travelPx = DEFAULT_TRAVEL_PX } = options;
  if (given !== undefined && !(given % 2 === 1 && given >= SMALLEST_PX && given <= LARGEST_PX)) {
    throw new Error(`a patch is an odd number of pixels from ${SMALLEST_PX} to ${LARGEST_PX}, not ${given}`);
  }
  const noiseDn = imageNoiseDn(image, noiseArea(x, y));
  const wanted = given === undefined ? SIZES_PX : [given];
  let fitting: readonly number[] = wanted.filter((size) => fits(image, x, y, size));
  if (fitting.length === 0 && given === undefined && fits(image, x, y, SIZE_AT_EDGE_PX))
    fitting = [SIZE_AT_EDGE_PX];
  if (fitting.length === 0) {
    const sizePx = given ?? SIZE_AT_EDGE_PX;
    return {
      judgement: { ...NOTHING_KNOWN, sizePx, noiseDn, reason: edgeReason(image, x, y, sizePx) },
      template: null,
    };
  }

  const { template, texture } = smallestGoodEnough(
    fitting.map((size) => cutTemplate(image, x, y, { widthPx: size, noiseDn })),
  );
  return judge(image, x, y, template, texture, travelPx);
}

const NOTHING_KNOWN: Omit<SpotJudgement, 'sizePx' | 'noiseDn' | 'reason'> = {
  ok: false,
  warnings: [],
  expectedUPx: null,
  expectedUBestPx: null,
  bestDirectionDeg: 0,
  contrastDn: 0,
  saturatedFraction: 0,
  detailPx: null,
  aliasPx: null,
  aliasScore: null,
};

function judge(
  image: LumaImage,
  x: number,
  y: number,
  template: Template,
  texture: PatchTexture,
  travelPx: number,
): ChosenTemplate {
  const sizePx = template.widthPx;
  const half = (sizePx - 1) / 2;
  const saturatedFraction = clippedFraction(
    image,
    Math.round(x) - half,
    Math.round(y) - half,
    sizePx,
    sizePx,
  );
  const reason = refusal(texture, saturatedFraction);
  const alias = reason === null ? findAlias(image, x, y, template, travelPx) : null;
  const judgement: SpotJudgement = {
    ok: reason === null,
    reason,
    warnings: reason === null ? warningsOf(saturatedFraction, alias) : [],
    sizePx,
    expectedUPx: texture.worstUPx,
    expectedUBestPx: texture.bestUPx,
    bestDirectionDeg: texture.bestDirectionDeg,
    noiseDn: template.noiseDn,
    contrastDn: texture.contrastDn,
    saturatedFraction,
    detailPx: texture.detailPx,
    aliasPx: alias?.distancePx ?? null,
    aliasScore: alias?.score ?? null,
  };
  return { judgement, template: reason === null ? { ...template, alias } : null };
}

interface Candidate {
  readonly template: Template;
  readonly texture: PatchTexture;
}

/** The smallest template that reaches the most ambitious aim that any reaches; the largest where none does. */
function smallestGoodEnough(templates: readonly Template[]): Candidate {
  const candidates = templates.map((template) => ({ template, texture: patchTexture(template) }));
  const share = Math.max(1, LEAST_NOISE_TO_CHOOSE_BY_DN / templates[0]!.noiseDn);
  for (const aim of AIMS) {
    const reached = candidates.find(
      ({ template, texture }) =>
        template.widthPx <= aim.largestPx &&
        texture.worstUPx !== null &&
        share * texture.worstUPx <= aim.uPx &&
        texture.contrastDn >= LEAST_CONTRAST_DN,
    );
    if (reached) return reached;
  }
  return candidates.at(-1)!;
}

function fits(image: LumaImage, x: number, y: number, size: number): boolean {
  const half = (size - 1) / 2;
  const [column, row] = [Math.round(x), Math.round(y)];
  return column - half >= 0 && row - half >= 0 && column + half < image.width && row + half < image.height;
}

function edgeReason(image: LumaImage, x: number, y: number, size: number): string {
  if (!(x >= -0.5 && y >= -0.5 && x <= image.width - 0.5 && y <= image.height - 0.5)) {
    return `The spot lies outside the picture of ${image.width} x ${image.height} px.`;
  }
  return `The spot is too near the edge of the picture: a patch of ${size} px needs ${(size - 1) / 2} px on every side.`;
}

function refusal(texture: PatchTexture, saturatedFraction: number): string | null {
  const { worstUPx, bestUPx, contrastDn } = texture;
  if (saturatedFraction > MOST_CLIPPED) {
    const percent = Math.round(100 * saturatedFraction);
    return `The spot is clipped: ${percent} % of it is pure white or black; change the exposure or choose another spot.`;
  }
  const poor =
    'The spot has too little texture to be followed: choose one with more contrast, or mark the part.';
  if (contrastDn < LEAST_CONTRAST_DN || bestUPx === null || bestUPx > WORST_U_PX) return poor;
  if (worstUPx === null || worstUPx > WORST_U_PX) {
    return (
      'The spot has texture along one direction only, so that motion along its edges cannot be seen: choose a ' +
      'corner, a dot or a pattern.'
    );
  }
  return null;
}

/** The nearest look-alike within the travel: close by first, since of many repeats not all are listed. */
function findAlias(
  image: LumaImage,
  x: number,
  y: number,
  template: Template,
  travelPx: number,
): Alias | null {
  for (const radiusPx of [Math.min(CLOSE_BY_PX, travelPx), travelPx]) {
    const nearest = listFits(image, template, { near: { x, y, radiusPx }, minScore: ALIKE_SCORE })
      .map((fit) => ({ distancePx: Math.hypot(fit.x - x, fit.y - y), score: fit.score }))
      // The marker itself is among the fits.
      .filter(({ distancePx }) => distancePx > 1)
      .sort((a, b) => a.distancePx - b.distancePx)[0];
    if (nearest) return nearest;
  }
  return null;
}

function warningsOf(saturatedFraction: number, alias: Alias | null): string[] {
  const warnings: string[] = [];
  if (saturatedFraction > MUCH_CLIPPED) {
    warnings.push(
      `${Math.round(100 * saturatedFraction)} % of the spot is clipped white or black: expose less, or more.`,
    );
  }
  if (alias) {
    warnings.push(
      `A place ${Math.round(alias.distancePx)} px away looks nearly the same: the marker may be mistaken for it ` +
        'where it moves fast or is covered.',
    );
  }
  return warnings;
}
