import { type DisplayRotationDeg, rowTimes } from '../camera/rolling-shutter.ts';
import { trackInMm } from '../scale/displacement.ts';
import { type PointPx, type PointTrack, seenCount } from '../scale/point-track.ts';
import { type ClipTracks, type MarkerTrack, TRACK_STATE, type TrackRole } from './clip-tracks.ts';
import type { SetupGeometry } from './setup-geometry.ts';

/** The motion of a clip's markers in millimetres in the plane of motion, the camera's own motion taken out. */
export interface ClipMotion {
  readonly response: PointTrack;
  /** null where no drive marker is in view. */
  readonly drive: PointTrack | null;
  /** Something at rest: the first ground marker, else the still patch on the rule; px, as seen; null without one. */
  readonly still: PointTrack | null;
  readonly groundSubtracted: boolean;
  /** Where response and drive markers are on the average, px as displayed. */
  readonly responseRestPx: PointPx;
  readonly driveRestPx: PointPx | null;
}

/** The first marker of a role that was followed. */
export function markerOf(tracks: ClipTracks, role: TrackRole): MarkerTrack | null {
  return tracks.markers.find((marker) => marker.role === role && marker.error === null) ?? null;
}

const FEWEST_FRAMES = 2; // one picture shows no motion

/** Positions of a marker with frames in which it was lost or doubtful as gaps, on times that hold for its own row. */
function pointTrack(tracks: ClipTracks, marker: MarkerTrack, rowReadoutS: number): PointTrack {
  const keep = (values: Float64Array): Float64Array =>
    values.map((value, i) => (marker.state[i] === TRACK_STATE.ok ? value : Number.NaN));
  const x = keep(marker.xPx);
  const y = keep(marker.yPx);
  const { displayedWidth, displayedHeight, rotationDeg } = tracks.facts;
  const timesS =
    rowReadoutS > 0
      ? rowTimes(tracks.timesS, x, y, {
          rowReadoutS,
          displayedWidthPx: displayedWidth,
          displayedHeightPx: displayedHeight,
          rotationDeg: rotationDeg as DisplayRotationDeg,
        })
      : tracks.timesS;
  return { timesS, x, y };
}

function rest(track: PointTrack): PointPx {
  let n = 0;
  let x = 0;
  let y = 0;
  for (let i = 0; i < track.x.length; i++) {
    if (!Number.isFinite(track.x[i])) continue;
    n += 1;
    x += track.x[i] ?? 0;
    y += track.y[i] ?? 0;
  }
  return [x / n, y / n];
}

/**
 * From pixels as seen to millimetres in the plane of motion.
 * @param rowReadoutS time from reading the first row to the last, s; 0 for a global shutter or where not known
 * @returns null where the response marker was not followed
 */
export function clipMotion(
  tracks: ClipTracks,
  geometry: SetupGeometry,
  rowReadoutS: number,
): ClipMotion | null {
  const responseMarker = markerOf(tracks, 'response');
  if (!responseMarker) return null;
  const response = pointTrack(tracks, responseMarker, rowReadoutS);
  if (seenCount(response) < FEWEST_FRAMES) return null;
  const driveMarker = markerOf(tracks, 'drive');
  const driveTrack = driveMarker ? pointTrack(tracks, driveMarker, rowReadoutS) : null;
  const drive = driveTrack && seenCount(driveTrack) >= FEWEST_FRAMES ? driveTrack : null;
  const grounds = tracks.markers
    .filter((marker) => marker.role === 'ground' && marker.error === null)
    .map((marker) => pointTrack(tracks, marker, rowReadoutS))
    .filter((track) => seenCount(track) >= FEWEST_FRAMES);
  const stillMarker = markerOf(tracks, 'still');
  const still = grounds[0] ?? (stillMarker ? pointTrack(tracks, stillMarker, rowReadoutS) : null);
  const inMm = (marker: PointTrack): PointTrack =>
    trackInMm({ marker, grounds, groundRestPx: null, toMm: geometry.toMm });
  return {
    response: inMm(response),
    drive: drive ? inMm(drive) : null,
    still,
    groundSubtracted: grounds.length > 0,
    responseRestPx: rest(response),
    driveRestPx: drive ? rest(drive) : null,
  };
}
