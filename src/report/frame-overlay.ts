import { Buffer } from 'node:buffer';
import type { Setup } from '../testfile/schema.ts';
import { significant } from './format-number.ts';
import type { SetupPicture } from './frame-pictures.ts';
import { type Html, html } from './html.ts';
import type { LengthUnit } from './length-unit.ts';

/** The line of motion through the response marker: a unit vector in the picture, y down. */
export interface AxisDirection {
  readonly x: number;
  readonly y: number;
}

/** Colours on a picture of any brightness: light lines with a dark edge, told apart by words and shape too. */
const ROLE_COLOUR = { response: '#56b4e9', drive: '#e69f00', ground: '#f0f0f0' } as const;
const DEFAULT_PATCH_PX = 32;
const AXIS_REACH = 0.22; // of the picture's larger side, to either side of the marker

interface Drawing {
  /** One picture-wide unit: line widths and letters are multiples of it, whatever the clip's size. */
  readonly unitPx: number;
  readonly setup: Setup;
  readonly unit: LengthUnit;
}

function label({ unitPx }: Drawing, x: number, y: number, text: string, anchor = 'middle'): Html {
  return html`<text x="${x}" y="${y}" font-size="${15 * unitPx}" text-anchor="${anchor}" fill="#fff" stroke="#111" stroke-width="${3.4 * unitPx}" paint-order="stroke" stroke-linejoin="round">${text}</text>`;
}

function line(
  { unitPx }: Drawing,
  from: readonly number[],
  to: readonly number[],
  colour: string,
  dash = '',
): Html {
  const [x1, y1, x2, y2] = [...from, ...to].map((value) => significant(value, 6));
  const ends = html`x1="${x1 ?? ''}" y1="${y1 ?? ''}" x2="${x2 ?? ''}" y2="${y2 ?? ''}"`;
  return html`<line ${ends} stroke="#111" stroke-width="${3.6 * unitPx}" stroke-opacity=".55"/><line ${ends} stroke="${colour}" stroke-width="${1.8 * unitPx}" stroke-dasharray="${dash}"/>`;
}

function scaleMark(drawing: Drawing): Html | null {
  const { scale } = drawing.setup;
  if (!scale) return null;
  const [dx, dy] = [scale.to[0] - scale.from[0], scale.to[1] - scale.from[1]];
  const length = Math.hypot(dx, dy) || 1;
  const tick = 9 * drawing.unitPx;
  const [nx, ny] = [(-dy / length) * tick, (dx / length) * tick];
  const across = ([x, y]: readonly [number, number]) =>
    line(drawing, [x - nx, y - ny], [x + nx, y + ny], '#fff');
  const middle = [(scale.from[0] + scale.to[0]) / 2, (scale.from[1] + scale.to[1]) / 2] as const;
  const text = `scale ${significant(scale.length * drawing.unit.perMm, 5)} ${drawing.unit.name}`;
  return html`${line(drawing, scale.from, scale.to, '#fff')}${across(scale.from)}${across(scale.to)}${label(drawing, middle[0], middle[1] - 12 * drawing.unitPx, text)}${(
    scale.plane ?? []
  ).map(
    ({ at: [x, y] }) =>
      html`<circle cx="${x}" cy="${y}" r="${5 * drawing.unitPx}" fill="none" stroke="#fff" stroke-width="${1.8 * drawing.unitPx}"/>`,
  )}`;
}

function markerMarks(drawing: Drawing): Html[] {
  const { unitPx } = drawing;
  return drawing.setup.markers.map((marker) => {
    const [width, height] = marker.size ?? [
      DEFAULT_PATCH_PX * Math.max(1, unitPx),
      DEFAULT_PATCH_PX * Math.max(1, unitPx),
    ];
    const [x, y] = marker.at;
    const box = (colour: string, stroke: number) =>
      html`<rect x="${x - width / 2}" y="${y - height / 2}" width="${width}" height="${height}" fill="none" stroke="${colour}" stroke-width="${stroke * unitPx}"/>`;
    const arm = 5 * unitPx;
    return html`${box('#111', 4)}${box(ROLE_COLOUR[marker.role], 2)}<path d="M${x - arm} ${y}H${x + arm}M${x} ${y - arm}V${y + arm}" stroke="${ROLE_COLOUR[marker.role]}" stroke-width="${1.2 * unitPx}"/>${label(drawing, x, y - height / 2 - 7 * unitPx, `${marker.role}: ${marker.id}`)}`;
  });
}

function axisMark(drawing: Drawing, reachPx: number, direction: AxisDirection | null): Html | null {
  const given = drawing.setup.motionAxis;
  if (given !== undefined && given !== 'auto')
    return line(drawing, given.from, given.to, '#f0e442', `${9 * drawing.unitPx} ${5 * drawing.unitPx}`);
  const response = drawing.setup.markers.find((marker) => marker.role === 'response');
  if (!response || !direction) return null;
  const [x, y] = response.at;
  const end = (sign: 1 | -1) => [x + sign * reachPx * direction.x, y + sign * reachPx * direction.y];
  return line(drawing, end(-1), end(1), '#f0e442', `${9 * drawing.unitPx} ${5 * drawing.unitPx}`);
}

const WIDTH_UNITS = 1000; // the picture's width in units of line width and letter size

/** The picture of a setup with scale, motion axis and markers drawn over it; coordinates are pixels as displayed. */
export function frameOverlay(
  picture: SetupPicture,
  setup: Setup,
  direction: AxisDirection | null,
  unit: LengthUnit,
): Html {
  const { displayedWidth: width, displayedHeight: height } = picture;
  const drawing: Drawing = { unitPx: Math.max(width, height) / WIDTH_UNITS, setup, unit };
  const source = `data:image/jpeg;base64,${Buffer.from(picture.jpeg).toString('base64')}`;
  // pixel centres are at integers, so the picture begins half a pixel before 0
  return html`<svg class="seen" viewBox="-0.5 -0.5 ${width} ${height}" role="img" aria-label="Frame ${picture.frame} of clip ${picture.clip} with scale, motion axis and markers" font-family="system-ui, 'Noto Sans', 'DejaVu Sans', sans-serif"><image href="${source}" x="-0.5" y="-0.5" width="${width}" height="${height}"/>${axisMark(drawing, AXIS_REACH * Math.max(width, height), direction)}${scaleMark(drawing)}${markerMarks(drawing)}</svg>`;
}
