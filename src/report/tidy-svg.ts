import { shortPath } from './short-path.ts';

const DECIMALS = 1; // as in paths
const PLACES = / (?:x|y|width|height|transform|rx|ry|r|cx|cy)="[^"]*"/g;

function rounded(number: string): string {
  return String(Number(Number(number).toFixed(DECIMALS)) + 0);
}

/**
 * A drawn vector picture, smaller and always the same: no prolog, coordinates with one decimal, ids counted from the
 * picture's own beginning, and a view box so that it may be shown at any size.
 */
export function tidySvg(svg: string, widthPx: number, heightPx: number): string {
  const ids = new Map<string, string>();
  const idOf = (id: string): string => {
    const known = ids.get(id) ?? `c${ids.size}`;
    ids.set(id, known);
    return known;
  };
  return svg
    .replace(/^<\?xml[^>]*>\s*/, '')
    .replace(/ d="([^"]*)"/g, (_, path: string) => ` d="${shortPath(path)}"`)
    .replace(PLACES, (attribute) => attribute.replace(/-?\d+\.\d{2,}/g, rounded))
    .replace(/ id="([^"]+)"/g, (_, id: string) => ` id="${idOf(id)}"`)
    .replace(/url\(#([^)]+)\)/g, (_, id: string) => `url(#${idOf(id)})`)
    .replace(/>\s+</g, '><')
    .replace('<svg ', `<svg viewBox="0 0 ${widthPx} ${heightPx}" `)
    .trim();
}

/** A picture as an address that holds it, for `src` in double quotes: shown without any request. */
export function svgDataUrl(svg: string): string {
  return `data:image/svg+xml,${svg.replace(/[%#<>"{}|\\^`\r\n]/g, encodeURIComponent).replaceAll("'", '%27')}`;
}
