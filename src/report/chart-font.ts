import { createRequire } from 'node:module';
import type { GlobalFonts as Fonts } from '@napi-rs/canvas';
import { CHART_FONT } from './charts/looks.ts';

const PACKAGED = '@fontsource/dejavu-sans/files/dejavu-sans-latin-400-normal.woff2';

/** Where the letters of charts come from: the packaged font, the system's, or nowhere (labels would be missing). */
export type ChartFontOrigin = 'packaged' | 'system' | 'none';

/**
 * Registers the packaged chart font, so that charts have the same letters on every machine, one without any fonts
 * included. Where the package is not installed the system's sans-serif stands in, if there is one.
 */
export function registerChartFont(fonts: typeof Fonts): ChartFontOrigin {
  if (fonts.has(CHART_FONT)) return 'packaged';
  try {
    const path = createRequire(import.meta.url).resolve(PACKAGED);
    // a packed desktop program keeps files that other code opens beside its archive
    if (fonts.registerFromPath(path.replace(/app\.asar(?=[\\/])/, 'app.asar.unpacked'), CHART_FONT))
      return 'packaged';
  } catch {
    // not installed
  }
  return fonts.families.length > 0 ? 'system' : 'none';
}
