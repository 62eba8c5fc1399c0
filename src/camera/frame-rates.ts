/** Frame rates that phone cameras offer, frames/s. */
export const PHONE_FRAME_RATES_HZ: readonly number[] = [24, 25, 30, 50, 60, 90, 100, 120, 180, 240, 480, 960];

/** Frames a period that show a motion without folding and leave room for its second harmonic. */
const FRAMES_PER_PERIOD = 5;

/**
 * The lowest phone frame rate that shows a frequency with at least five frames a period; where none does, the one
 * whose alias lies furthest from 0 and from half the rate.
 */
export function fasterRateHz(frequencyHz: number): number {
  const direct = PHONE_FRAME_RATES_HZ.find((rate) => rate >= FRAMES_PER_PERIOD * frequencyHz);
  return direct ?? bestFoldingRateHz(frequencyHz);
}

function bestFoldingRateHz(frequencyHz: number): number {
  let best = PHONE_FRAME_RATES_HZ[0]!;
  let bestRoom = -1;
  for (const rate of PHONE_FRAME_RATES_HZ) {
    const alias = Math.abs(frequencyHz - rate * Math.round(frequencyHz / rate)) / rate;
    const room = Math.min(alias, 0.5 - alias);
    // on a tie the faster camera wins: it blurs less
    if (room >= bestRoom - 1e-12) [best, bestRoom] = [rate, Math.max(room, bestRoom)];
  }
  return best;
}
