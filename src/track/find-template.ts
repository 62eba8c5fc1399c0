import { correlateByOpenCv } from './opencv.ts';
import { makeSearch } from './search-image.ts';
import type { TemplateSearch } from './template-search.ts';

/**
 * Finds a template in a whole frame, or near a point of it: the first finding of a setup's markers in another clip, and
 * the finding again of a marker that was lost or stands elsewhere. Positions are in pixels of the image, to a
 * fraction of a pixel.
 *
 * @returns null where nothing fits with at least `minScore` (0.6 unless said)
 */
export const findTemplate: TemplateSearch = makeSearch(correlateByOpenCv);
