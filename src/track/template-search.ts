import type { LumaImage } from './luma-image.ts';
import type { Template } from './template.ts';

/** One place where a template fits, in pixels of the image searched; `score` is the ZNCC, at most 1. */
export interface TemplateFit {
  readonly x: number;
  readonly y: number;
  readonly score: number;
}

/** Where a search found a template. */
export interface FoundTemplate extends TemplateFit {
  /** Contrast relative to the picture the template was cut from, both on the same full scale. */
  readonly gain: number;
  /** True where another place fits nearly as well, so that the answer may be the wrong one of two. */
  readonly ambiguous: boolean;
  /** The next best place that stands apart from the best, null where nothing else resembles the template. */
  readonly second: TemplateFit | null;
}

/** What a search is told. */
export interface SearchOptions {
  /** Search only where the marker's centre is within `radiusPx` of this point, in pixels of the image. */
  readonly near?: { readonly x: number; readonly y: number; readonly radiusPx: number };
  /** Fits below this score count as not found, 0 to 1. */
  readonly minScore?: number;
}

/**
 * Finds a template in an image without knowing where it is; null when it is not there.
 * `findTemplate` is the thorough one, for whole frames; `searchCoarsely` is the light one, for regions.
 */
export type TemplateSearch = (
  image: LumaImage,
  template: Template,
  options?: SearchOptions,
) => FoundTemplate | null;
