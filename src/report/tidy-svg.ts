const DECIMALS = 2; // a hundredth of a CSS pixel is finer than any printer

/**
 * A drawn vector picture, smaller and scalable: no prolog, coordinates with two decimals, and a view box so that it
 * may be shown at any size.
 */
export function tidySvg(svg: string, widthPx: number, heightPx: number): string {
  return svg
    .replace(/^<\?xml[^>]*>\s*/, '')
    .replace(/\d+\.\d+/g, (number) => String(Number(Number(number).toFixed(DECIMALS))))
    .replace(/>\s+</g, '><')
    .replace('<svg ', `<svg viewBox="0 0 ${widthPx} ${heightPx}" `)
    .trim();
}

/** A picture as an address that holds it: for `src`, within quotes, without any request to a network. */
export function svgDataUrl(svg: string): string {
  return `data:image/svg+xml,${svg.replaceAll('"', "'").replace(/[%#<>{}|\\^`\r\n]/g, encodeURIComponent)}`;
}
