import { expect, it } from 'vitest';
import { svgDataUrl, tidySvg } from '../../src/report/tidy-svg.ts';

const RAW =
  '<?xml version="1.0" encoding="utf-8" ?>\n<svg xmlns="http://www.w3.org/2000/svg" width="20" height="10">\n<clipPath id="cl_a7"><rect x="1.2345" y="0" width="3.0001" height="2"/></clipPath>\n<g clip-path="url(#cl_a7)"><path fill="#0072B2" fill-opacity="0.16078432" d="M1.234 5.678L2 6Z"/></g></svg>';

it('drops the prolog, counts ids anew, rounds places but not opacities, and may be shown at any size', () => {
  expect(tidySvg(RAW, 20, 10)).toBe(
    '<svg viewBox="0 0 20 10" xmlns="http://www.w3.org/2000/svg" width="20" height="10"><clipPath id="c0"><rect x="1.2" y="0" width="3" height="2"/></clipPath><g clip-path="url(#c0)"><path fill="#0072B2" fill-opacity="0.16078432" d="m1.2 5.7l.8 .3z"/></g></svg>',
  );
});

it('a data address holds the picture whole (RFC 2397, percent-encoding of RFC 3986)', () => {
  const svg = `<svg a="1" b='2'>100 % #|\\</svg>`;
  const url = svgDataUrl(svg);
  expect(url).not.toMatch(/[<>"'#]/);
  expect(decodeURIComponent(url.replace('data:image/svg+xml,', ''))).toBe(svg);
});
