import { columnExtremes } from './decimate.ts';
import type { StripFit } from './strip-fit.ts';
import type { Size } from './view-transform.ts';

/** Everything the motion strip shows. Times in s, displacements in mm. */
export interface StripScene {
  readonly timeS: Float64Array;
  readonly displacementMm: Float64Array;
  readonly fromS: number;
  readonly toS: number;
  readonly window: readonly [number, number] | null;
  readonly fit: StripFit | null;
  /** Time of the frame shown. */
  readonly nowS: number | null;
  readonly rem: number;
}

/** Where the plot lies within the strip, px. */
export const STRIP_LEFT = 46;
const STRIP_BOTTOM = 20;
const RESIDUAL_SHARE = 0.2;

function token(name: string): string {
  return getComputedStyle(document.documentElement).getPropertyValue(`--${name}`).trim();
}

/** Column of a time, px. */
export function columnOf(timeS: number, scene: Pick<StripScene, 'fromS' | 'toS'>, size: Size): number {
  return STRIP_LEFT + ((timeS - scene.fromS) / (scene.toS - scene.fromS)) * (size.width - STRIP_LEFT);
}

/** Time of a column. */
export function timeOf(x: number, scene: Pick<StripScene, 'fromS' | 'toS'>, size: Size): number {
  return scene.fromS + ((x - STRIP_LEFT) / (size.width - STRIP_LEFT)) * (scene.toS - scene.fromS);
}

/** Draws displacement against time, the steady window shaded, the fit over it and the residual under it. */
export function drawStrip(context: CanvasRenderingContext2D, size: Size, scene: StripScene): void {
  context.clearRect(0, 0, size.width, size.height);
  const plot = size.height - STRIP_BOTTOM * (scene.rem / 13);
  const main = scene.fit ? plot * (1 - RESIDUAL_SHARE) : plot;
  const reach = largest(scene.displacementMm) * 1.08 || 1;
  const y = (value: number): number => (main / 2) * (1 - value / reach);
  context.font = `${0.85 * scene.rem}px ${getComputedStyle(document.body).fontFamily}`;
  context.lineJoin = 'round';
  shadeWindow(context, scene, size, plot);
  drawScales(context, scene, size, { main, plot, reach });
  drawRecord(context, scene, size, scene.displacementMm, y, token('s1'));
  if (scene.fit) {
    drawFit(context, scene, size, scene.fit, y);
    const room = plot - main;
    const reachLeft = largest(scene.fit.residualMm) || 1;
    const left = (value: number): number => main + room / 2 - ((room / 2) * 0.9 * value) / reachLeft;
    drawRecord(context, scene, size, scene.fit.residualMm, left, token('s2'));
    label(
      context,
      `residual, ${scene.fit.residualSdMm.toPrecision(2)} mm RMS`,
      STRIP_LEFT + 6,
      main + scene.rem,
      token('s2'),
    );
  }
  if (scene.nowS !== null) {
    const x = columnOf(scene.nowS, scene, size);
    context.strokeStyle = token('ink');
    context.lineWidth = 1;
    context.beginPath();
    context.moveTo(x, 0);
    context.lineTo(x, plot);
    context.stroke();
  }
}

/** Words on a ground of their own, so that the record does not run through them. */
function label(context: CanvasRenderingContext2D, words: string, x: number, y: number, colour: string): void {
  context.strokeStyle = token('paper');
  context.lineWidth = 4;
  context.strokeText(words, x, y);
  context.fillStyle = colour;
  context.fillText(words, x, y);
}

function shadeWindow(context: CanvasRenderingContext2D, scene: StripScene, size: Size, plot: number): void {
  if (!scene.window) return;
  const [from, to] = scene.window.map((each) => columnOf(each, scene, size)) as [number, number];
  context.fillStyle = token('steady');
  context.fillRect(from, 0, to - from, plot);
}

function drawScales(
  context: CanvasRenderingContext2D,
  scene: StripScene,
  size: Size,
  { main, plot, reach }: { main: number; plot: number; reach: number },
): void {
  context.strokeStyle = token('rule');
  context.lineWidth = 1;
  context.beginPath();
  context.moveTo(STRIP_LEFT, main / 2);
  context.lineTo(size.width, main / 2);
  context.moveTo(STRIP_LEFT, 0);
  context.lineTo(STRIP_LEFT, plot);
  context.stroke();
  context.fillStyle = token('faint');
  context.textAlign = 'right';
  context.textBaseline = 'middle';
  const step = niceStep(reach);
  for (let value = -Math.floor(reach / step) * step; value <= reach; value += step)
    context.fillText(
      `${Number(value.toPrecision(6))}`,
      STRIP_LEFT - 5,
      Math.max(scene.rem * 0.5, (main / 2) * (1 - value / reach)),
    );
  context.textAlign = 'left';
  context.textBaseline = 'alphabetic';
  context.fillText('mm', 2, main / 2 - 1.2 * scene.rem);
  const stepS = niceStep((scene.toS - scene.fromS) / 2.5);
  for (let t = Math.ceil(scene.fromS / stepS) * stepS; t <= scene.toS; t += stepS) {
    const x = columnOf(t, scene, size);
    const words = `${Number(t.toPrecision(6))} s`;
    if (x + 40 < size.width) context.fillText(words, x, size.height - 4);
  }
}

/** One of 1, 2, 5 times a power of ten, near half of a length. */
function niceStep(length: number): number {
  const power = 10 ** Math.floor(Math.log10(length / 1.5));
  return ([1, 2, 5, 10].find((each) => each * power >= length / 2) ?? 10) * power;
}

function largest(values: Float64Array): number {
  let most = 0;
  for (const value of values) if (Math.abs(value) > most) most = Math.abs(value);
  return most;
}

/** A record as its extremes in each column: gaps stay gaps. */
function drawRecord(
  context: CanvasRenderingContext2D,
  scene: StripScene,
  size: Size,
  values: Float64Array,
  y: (value: number) => number,
  colour: string,
): void {
  const columns = Math.max(1, Math.round(size.width - STRIP_LEFT));
  const perColumn = (scene.timeS.length / columns) * 2;
  context.strokeStyle = colour;
  context.lineWidth = 1.3;
  context.beginPath();
  let pen = false;
  const to = (x: number, value: number): void => {
    if (pen) context.lineTo(x, y(value));
    else context.moveTo(x, y(value));
    pen = true;
  };
  if (perColumn < 1.2)
    for (const [k, t] of scene.timeS.entries()) {
      const value = values[k]!;
      if (Number.isNaN(value)) pen = false;
      else if (t >= scene.fromS - 1 && t <= scene.toS + 1) to(columnOf(t, scene, size), value);
    }
  else {
    const { low, high } = columnExtremes(scene.timeS, values, scene.fromS, scene.toS, columns);
    let since = 0;
    for (let column = 0; column < columns; column++) {
      if (Number.isNaN(low[column]!)) {
        if (++since > 3) pen = false; // fewer frames than columns is no gap
        continue;
      }
      since = 0;
      to(STRIP_LEFT + column, low[column]!);
      to(STRIP_LEFT + column, high[column]!);
    }
  }
  context.save();
  clipTo(context, size);
  context.stroke();
  context.restore();
}

function clipTo(context: CanvasRenderingContext2D, size: Size): void {
  const now = new Path2D();
  now.rect(STRIP_LEFT, 0, size.width - STRIP_LEFT, size.height);
  context.clip(now);
}

function drawFit(
  context: CanvasRenderingContext2D,
  scene: StripScene,
  size: Size,
  fit: StripFit,
  y: (value: number) => number,
): void {
  const [from, to] = scene.window ?? [scene.fromS, scene.toS];
  const [start, end] = [Math.max(from, scene.fromS), Math.min(to, scene.toS)];
  const [first, last] = [columnOf(start, scene, size), columnOf(end, scene, size)];
  context.strokeStyle = token('s3');
  context.lineWidth = 1.1;
  context.beginPath();
  for (let x = first; x <= last; x += 0.5) {
    const place = y(fit.at(timeOf(x, scene, size)));
    if (x === first) context.moveTo(x, place);
    else context.lineTo(x, place);
  }
  context.stroke();
}
