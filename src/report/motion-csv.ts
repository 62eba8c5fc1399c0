import { type ClipTracks, TRACK_STATE } from '../engine/clip-tracks.ts';
import { csvLine } from './safe-csv.ts';

const PIXEL_DECIMALS = 4; // a tenth of the best registration error
const TIME_DECIMALS = 7;
const MM_DECIMALS = 6;

function rounded(value: number | undefined, decimals: number): number | null {
  return value === undefined || !Number.isFinite(value) ? null : Number(value.toFixed(decimals));
}

/**
 * `motion/CLIP.csv`: frame, time, then x, y (pixels as displayed, before any correction) and score of each marker,
 * empty where it was lost, and last the displacement of the response marker along the motion axis in mm.
 * @param displacementMm one value per decoded frame, NaN where there is none; null where the clip has no scale
 */
export function motionCsv(tracks: ClipTracks, displacementMm: Float64Array | null): string {
  const markers = tracks.markers.filter((marker) => marker.role !== 'still');
  const head = [
    'frame',
    'time_s',
    ...markers.flatMap((marker) => [`${marker.id}_x_px`, `${marker.id}_y_px`, `${marker.id}_score`]),
    'displacement_mm',
  ];
  const lines = [csvLine(head)];
  for (let i = 0; i < tracks.timesS.length; i++) {
    const cells = markers.flatMap((marker) =>
      marker.state[i] === TRACK_STATE.lost
        ? [null, null, null]
        : [
            rounded(marker.xPx[i], PIXEL_DECIMALS),
            rounded(marker.yPx[i], PIXEL_DECIMALS),
            rounded(marker.score[i], PIXEL_DECIMALS),
          ],
    );
    lines.push(
      csvLine([
        tracks.frameIndex[i] ?? i,
        rounded(tracks.timesS[i], TIME_DECIMALS),
        ...cells,
        rounded(displacementMm?.[i], MM_DECIMALS),
      ]),
    );
  }
  return lines.join('');
}
