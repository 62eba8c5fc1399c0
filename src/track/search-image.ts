import { type CorrelationMap, correlatePlainly, type FloatImage, highestPeaks } from './correlation-map.ts';
import { AffineRegistrar } from './icgn-affine.ts';
import { TranslationRegistrar } from './icgn-translation.ts';
import type { LumaImage } from './luma-image.ts';
import { FULL_SCALE_DN } from './patch-window.ts';
import type { Registration } from './registration.ts';
import type { Template } from './template.ts';
import type { FoundTemplate, SearchOptions, TemplateFit, TemplateSearch } from './template-search.ts';

// Half of the patch covered, or turned by more than a few degrees: no longer safe to call it found.
const DEFAULT_LEAST_SCORE = 0.6;
// Binning by 2 quarters the places and the pixels; patches smaller than this lose too much by it.
const LEAST_FOR_BINNING_PX = 25;
const LEAST_FOR_COARSE_BINNING_PX = 37;
const LARGE_AREA_PX = 400_000;
// A coarse binning's answer is taken only where it can hardly be bettered.
const CERTAIN_SCORE = 0.85;
const CANDIDATES = 8;
const LISTED = 24;
// A fine texture that lies across the bins correlates at 0.5 or so before it is registered.
const LEAST_COARSE_SCORE = 0.3;
// Registration pulls in from 4 px, so peaks closer than this lead to the same place.
const PEAKS_APART_PX = 6;
const SAME_PLACE_PX = 2;
// Below this score a translation may hide a small turn of the part.
const TRY_AFFINE_BELOW = 0.9;
// Two scores this close cannot be told apart once light, blur and noise have changed; low scores even less.
const AMBIGUOUS_WITHIN = 0.05;
const AMBIGUOUS_SHARE = 0.4;

/** Every place where a template fits, best first; those below the lowest score worth a look are left out. */
export type FitList = (
  image: LumaImage,
  template: Template,
  options?: SearchOptions,
) => readonly TemplateFit[];

/**
 * Makes a search of a whole image or a part of it out of a way to correlate: a map of the binned image, its highest
 * peaks, and the registration of each to a fraction of a pixel. Light, contrast and bit depth may differ from
 * the template's picture, and the part may be turned by some degrees.
 */
export function makeSearch(correlate: CorrelationMap): TemplateSearch {
  return (image, template, options = {}) => {
    const area = searchArea(image, template, options);
    if (area.width < template.widthPx || area.height < template.heightPx) return null;
    const minScore = options.minScore ?? DEFAULT_LEAST_SCORE;
    let found: FoundTemplate | null = null;
    for (const bin of binnings(template, area)) {
      const starts = coarsePlaces(correlate, image, template, area, bin, CANDIDATES);
      found = choose(registerAll(image, template, starts), minScore);
      if (found && found.score >= CERTAIN_SCORE && !found.ambiguous) break;
    }
    return found;
  };
}

/** The light search, for regions: plain sums, nothing to load. */
export const searchCoarsely: TemplateSearch = makeSearch(correlatePlainly);

/** All places that look like the template within a part of an image, for judging how unique it is. */
export const listFits: FitList = (image, template, options = {}) => {
  const area = searchArea(image, template, options);
  if (area.width < template.widthPx || area.height < template.heightPx) return [];
  const [bin = 1] = binnings(template, area).slice(-1);
  const fits = registerAll(
    image,
    template,
    coarsePlaces(correlatePlainly, image, template, area, bin, LISTED),
  );
  return fits.filter((fit) => fit.score >= (options.minScore ?? DEFAULT_LEAST_SCORE));
};

/** The binnings to try, coarsest first: a coarse one is many times faster, but sees no fine texture. */
function binnings(template: Template, area: Area): readonly number[] {
  const side = Math.min(template.widthPx, template.heightPx);
  if (side < LEAST_FOR_BINNING_PX) return [1];
  const large = side >= LEAST_FOR_COARSE_BINNING_PX && area.width * area.height > LARGE_AREA_PX;
  return large ? [4, 2] : [2];
}

/** Where the binned template correlates best with the binned image, as places of the marked point. */
function coarsePlaces(
  correlate: CorrelationMap,
  image: LumaImage,
  template: Template,
  area: Area,
  bin: number,
  most: number,
): { readonly x: number; readonly y: number }[] {
  const picture = binned(image.data, image.width, area, bin, FULL_SCALE_DN / image.maxValue);
  const whole = { left: 0, top: 0, width: template.widthPx, height: template.heightPx };
  const patch = binned(template.raw, template.widthPx, whole, bin, 1);
  const map = correlate(picture, patch);
  const columns = picture.width - patch.width + 1;
  return highestPeaks(map, columns, most, LEAST_COARSE_SCORE, PEAKS_APART_PX / bin).map(
    ({ column, row }) => ({
      x: area.left + bin * column + (template.widthPx - 1) / 2 + template.pointXPx,
      y: area.top + bin * row + (template.heightPx - 1) / 2 + template.pointYPx,
    }),
  );
}

interface Area {
  readonly left: number;
  readonly top: number;
  readonly width: number;
  readonly height: number;
}

/** The part of the image that the patch may cover. */
function searchArea(image: LumaImage, template: Template, { near }: SearchOptions): Area {
  if (!near) return { left: 0, top: 0, width: image.width, height: image.height };
  const reachX = near.radiusPx + (template.widthPx - 1) / 2;
  const reachY = near.radiusPx + (template.heightPx - 1) / 2;
  const left = Math.max(0, Math.round(near.x - template.pointXPx - reachX));
  const top = Math.max(0, Math.round(near.y - template.pointYPx - reachY));
  const right = Math.min(image.width, Math.round(near.x - template.pointXPx + reachX) + 1);
  const bottom = Math.min(image.height, Math.round(near.y - template.pointYPx + reachY) + 1);
  return { left, top, width: Math.max(0, right - left), height: Math.max(0, bottom - top) };
}

/** Means over `bin` x `bin` pixels. */
function binned(data: ArrayLike<number>, stride: number, area: Area, bin: number, scale: number): FloatImage {
  const width = Math.floor(area.width / bin);
  const height = Math.floor(area.height / bin);
  const out = new Float32Array(width * height);
  const share = scale / (bin * bin);
  for (let row = 0, to = 0; row < height; row++) {
    for (let column = 0; column < width; column++, to++) {
      const at = (area.top + bin * row) * stride + area.left + bin * column;
      let sum = 0;
      for (let j = 0; j < bin; j++) {
        for (let k = 0; k < bin; k++) sum += data[at + j * stride + k]!;
      }
      out[to] = sum * share;
    }
  }
  return { data: out, width, height };
}

interface RegisteredFit extends TemplateFit {
  readonly gain: number;
}

/** Registers the template from each start; several that end in one place count once. */
function registerAll(
  image: LumaImage,
  template: Template,
  starts: readonly { readonly x: number; readonly y: number }[],
): RegisteredFit[] {
  if (starts.length === 0) return [];
  const translation = new TranslationRegistrar(template);
  let affine: AffineRegistrar | null = null;
  const fits: RegisteredFit[] = [];
  for (const start of starts) {
    const shifted = copyFit(translation.register(image, start.x, start.y));
    let best = shifted;
    if (!shifted || shifted.score < TRY_AFFINE_BELOW) {
      affine ??= new AffineRegistrar(template);
      const from = shifted && shifted.score > LEAST_COARSE_SCORE ? shifted : start;
      const turned = copyFit(affine.register(image, from.x, from.y));
      if (turned && turned.score > (shifted?.score ?? -1)) best = turned;
    }
    if (best && insideImage(image, template, best)) fits.push(best);
  }
  fits.sort((a, b) => b.score - a.score);
  return fits.filter(
    (fit, k) =>
      !fits.slice(0, k).some((better) => Math.hypot(fit.x - better.x, fit.y - better.y) < SAME_PLACE_PX),
  );
}

function copyFit(registration: Registration): RegisteredFit | null {
  const { x, y, score, gain, converged } = registration;
  return converged ? { x, y, score, gain } : null;
}

function insideImage(image: LumaImage, template: Template, fit: TemplateFit): boolean {
  const left = fit.x - template.pointXPx - (template.widthPx - 1) / 2;
  const top = fit.y - template.pointYPx - (template.heightPx - 1) / 2;
  // Half a pixel of slack: a patch cut at the very border is found a hair outside as often as inside.
  return (
    left >= -0.5 &&
    top >= -0.5 &&
    left + template.widthPx <= image.width + 0.5 &&
    top + template.heightPx <= image.height + 0.5
  );
}

function choose(fits: readonly RegisteredFit[], minScore: number): FoundTemplate | null {
  const [best, second] = fits;
  if (!best || best.score < minScore) return null;
  const margin = Math.max(AMBIGUOUS_WITHIN, AMBIGUOUS_SHARE * (1 - best.score));
  return {
    ...best,
    ambiguous: second !== undefined && second.score > best.score - margin,
    second: second ? { x: second.x, y: second.y, score: second.score } : null,
  };
}
