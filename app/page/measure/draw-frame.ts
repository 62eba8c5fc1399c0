import type { PointPx } from '../../../src/testfile/schema.ts';
import type { MotionTrack } from '../../shared/tracks-bytes.ts';
import type { LoadedFrame } from './frame-loader.ts';
import type { PlacedPoint, PointKey } from './points.ts';
import { type Size, toView, type ViewTransform } from './view-transform.ts';

/** Everything the stage shows. */
export interface Scene {
  readonly loaded: LoadedFrame | null;
  readonly picture: Size;
  readonly view: ViewTransform;
  readonly points: readonly PlacedPoint[];
  readonly selected: PointKey | null;
  readonly track: MotionTrack | null;
  readonly frame: number;
  /** Side of each marker's patch where known, px. */
  readonly patchPx: ReadonlyMap<PointKey, number>;
  /** Words beside points, such as the expected uncertainty. */
  readonly words: ReadonlyMap<PointKey, string>;
  /** Where the hand is while something is to be placed. */
  readonly aim: PointPx | null;
  readonly scaleText: string | null;
  readonly stageWidth: number;
  /** Size of a rem, px. */
  readonly rem: number;
}

/** Okabe-Ito colours that stand out on a picture, by role. */
export const ROLE_COLOURS: Readonly<Record<string, string>> = {
  response: '#56b4e9',
  drive: '#e69f00',
  ground: '#e8ecf0',
  scale: '#f0e442',
  axis: '#cc79a7',
};
const LOST = '#d55e00';
const TRAIL_FRAMES = 90;

/** Draws the stage. The context is scaled so that one unit is one CSS px. */
export function drawScene(context: CanvasRenderingContext2D, stage: Size, scene: Scene): void {
  const { loaded, picture, view } = scene;
  context.clearRect(0, 0, stage.width, stage.height);
  if (loaded) {
    context.imageSmoothingEnabled = view.zoom < 3;
    const [x, y] = toView(view, [-0.5, -0.5]);
    context.drawImage(loaded.bitmap, x, y, picture.width * view.zoom, picture.height * view.zoom);
  }
  context.font = `${0.92 * scene.rem}px ${getComputedStyle(document.body).fontFamily}`;
  context.lineCap = 'round';
  drawScaleLine(context, scene);
  drawAxis(context, scene);
  for (const point of scene.points) if (point.marker) drawMarker(context, scene, point);
  for (const point of scene.points) if (!point.marker) drawCross(context, scene, point);
  if (scene.aim) drawAim(context, toView(view, scene.aim), stage);
}

function text(context: CanvasRenderingContext2D, words: string, x: number, y: number, colour: string): void {
  context.lineWidth = 3;
  context.strokeStyle = '#000a';
  context.strokeText(words, x, y);
  context.fillStyle = colour;
  context.fillText(words, x, y);
}

/** A line with a dark edge, to be seen on any ground. */
function edged(context: CanvasRenderingContext2D, path: Path2D, colour: string, width: number): void {
  context.strokeStyle = '#0009';
  context.lineWidth = width + 2;
  context.stroke(path);
  context.strokeStyle = colour;
  context.lineWidth = width;
  context.stroke(path);
}

function find(scene: Scene, key: PointKey): [number, number] | null {
  const point = scene.points.find((each) => each.key === key);
  return point ? toView(scene.view, point.at) : null;
}

function drawScaleLine(context: CanvasRenderingContext2D, scene: Scene): void {
  const [from, to] = [find(scene, 'scale-from'), find(scene, 'scale-to')];
  if (!from || !to) return;
  const path = new Path2D();
  path.moveTo(...from);
  path.lineTo(...to);
  edged(context, path, ROLE_COLOURS['scale'] ?? '', 1.4);
  if (!scene.scaleText) return;
  context.textAlign = 'center';
  text(context, scene.scaleText, (from[0] + to[0]) / 2, Math.max(from[1], to[1]) + 2.6 * scene.rem, '#fff');
  context.textAlign = 'start';
}

function drawAxis(context: CanvasRenderingContext2D, scene: Scene): void {
  const [from, to] = [find(scene, 'axis-from'), find(scene, 'axis-to')];
  if (!from || !to) return;
  const path = new Path2D();
  path.moveTo(...from);
  path.lineTo(...to);
  context.setLineDash([3, 5]);
  edged(context, path, ROLE_COLOURS['axis'] ?? '', 1.4);
  context.setLineDash([]);
}

function drawCross(context: CanvasRenderingContext2D, scene: Scene, point: PlacedPoint): void {
  const [x, y] = toView(scene.view, point.at);
  const selected = scene.selected === point.key;
  const arm = selected ? 12 : 8;
  const path = new Path2D();
  path.moveTo(x - arm, y);
  path.lineTo(x - 3, y);
  path.moveTo(x + 3, y);
  path.lineTo(x + arm, y);
  path.moveTo(x, y - arm);
  path.lineTo(x, y - 3);
  path.moveTo(x, y + 3);
  path.lineTo(x, y + arm);
  edged(
    context,
    path,
    ROLE_COLOURS[point.key.startsWith('scale') ? 'scale' : 'axis'] ?? '',
    selected ? 2.2 : 1.6,
  );
}

function drawMarker(context: CanvasRenderingContext2D, scene: Scene, point: PlacedPoint): void {
  const role = point.marker?.role ?? 'response';
  const colour = ROLE_COLOURS[role] ?? '#fff';
  const path = scene.track?.markers.find((each) => `marker:${each.id}` === point.key);
  const at = path ? scene.track?.frame.indexOf(scene.frame) : undefined;
  const seen = path && at !== undefined && at >= 0 ? ([path.xPx[at], path.yPx[at]] as const) : null;
  if (path && scene.track) drawTrail(context, scene, scene.track, path.id, at ?? -1, colour);
  const lost = seen !== null && !Number.isFinite(seen[0]);
  const isMoved = scene.selected === point.key && !seen;
  const place: PointPx = seen && !lost ? [seen[0] ?? 0, seen[1] ?? 0] : [...point.at];
  const [x, y] = toView(scene.view, place);
  const half = Math.max(9, ((scene.patchPx.get(point.key) ?? 31) / 2) * scene.view.zoom);
  context.setLineDash(lost ? [4, 4] : []);
  edged(
    context,
    corners(x, y, half),
    lost ? LOST : colour,
    scene.selected === point.key || isMoved ? 2.6 : 1.8,
  );
  context.setLineDash([]);
  const dot = new Path2D();
  dot.arc(x, y, 1.4, 0, 2 * Math.PI);
  edged(context, dot, lost ? LOST : colour, 1.2);
  const words = scene.words.get(point.key);
  const label = lost ? `${point.name} · lost in this frame` : words ? `${point.name} · ${words}` : point.name;
  const right = scene.stageWidth - context.measureText(label).width - 4;
  text(
    context,
    label,
    Math.max(4, Math.min(x - half, right)),
    y - half - 0.5 * scene.rem,
    lost ? '#ffb38a' : '#fff',
  );
}

/** The four corners of a square. */
function corners(x: number, y: number, half: number): Path2D {
  const arm = Math.min(half * 0.6, 14);
  const path = new Path2D();
  for (const [sx, sy] of [
    [-1, -1],
    [1, -1],
    [1, 1],
    [-1, 1],
  ] as const) {
    path.moveTo(x + sx * half, y + sy * (half - arm));
    path.lineTo(x + sx * half, y + sy * half);
    path.lineTo(x + sx * (half - arm), y + sy * half);
  }
  return path;
}

/** Where the marker was in the frames before and after, fading with the distance in time. */
function drawTrail(
  context: CanvasRenderingContext2D,
  scene: Scene,
  track: MotionTrack,
  id: string,
  at: number,
  colour: string,
): void {
  const path = track.markers.find((each) => each.id === id);
  if (!path || at < 0) return;
  context.strokeStyle = colour;
  context.lineWidth = 1.2;
  context.globalAlpha = 0.75;
  context.beginPath();
  let pen = false;
  for (
    let k = Math.max(0, at - TRAIL_FRAMES);
    k <= Math.min(track.frame.length - 1, at + TRAIL_FRAMES);
    k++
  ) {
    const [x, y] = [path.xPx[k] ?? Number.NaN, path.yPx[k] ?? Number.NaN];
    if (!Number.isFinite(x)) {
      pen = false; // a gap stays a gap
      continue;
    }
    const [vx, vy] = toView(scene.view, [x, y]);
    if (pen) context.lineTo(vx, vy);
    else context.moveTo(vx, vy);
    pen = true;
  }
  context.stroke();
  context.globalAlpha = 1;
}

function drawAim(context: CanvasRenderingContext2D, [x, y]: [number, number], stage: Size): void {
  const path = new Path2D();
  path.moveTo(x, 0);
  path.lineTo(x, y - 8);
  path.moveTo(x, y + 8);
  path.lineTo(x, stage.height);
  path.moveTo(0, y);
  path.lineTo(x - 8, y);
  path.moveTo(x + 8, y);
  path.lineTo(stage.width, y);
  context.globalAlpha = 0.6;
  edged(context, path, '#fff', 0.8);
  context.globalAlpha = 1;
}
