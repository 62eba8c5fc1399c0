/** How the picture lies on the stage: view = picture * zoom + offset, both in CSS px; pixel centres at integers. */
export interface ViewTransform {
  readonly zoom: number;
  readonly offsetX: number;
  readonly offsetY: number;
}

/** A size in px. */
export interface Size {
  readonly width: number;
  readonly height: number;
}

const SMALLEST_ZOOM = 0.05;
const LARGEST_ZOOM = 32;

/** The whole picture in the middle of the stage. */
export function fitPicture(picture: Size, stage: Size): ViewTransform {
  const zoom = Math.min(stage.width / picture.width, stage.height / picture.height);
  // the picture's edge lies half a pixel before the centre of its first pixel
  return {
    zoom,
    offsetX: (stage.width - picture.width * zoom) / 2 + zoom / 2,
    offsetY: (stage.height - picture.height * zoom) / 2 + zoom / 2,
  };
}

/** Zooms by a factor so that the point of the stage stays where it is. */
export function zoomedAt(view: ViewTransform, factor: number, x: number, y: number): ViewTransform {
  const zoom = Math.min(LARGEST_ZOOM, Math.max(SMALLEST_ZOOM, view.zoom * factor));
  const actual = zoom / view.zoom;
  return { zoom, offsetX: x - (x - view.offsetX) * actual, offsetY: y - (y - view.offsetY) * actual };
}

/** From the stage to the picture. */
export function toPicture(view: ViewTransform, x: number, y: number): [number, number] {
  return [(x - view.offsetX) / view.zoom, (y - view.offsetY) / view.zoom];
}

/** From the picture to the stage. */
export function toView(view: ViewTransform, [x, y]: readonly [number, number]): [number, number] {
  return [x * view.zoom + view.offsetX, y * view.zoom + view.offsetY];
}
