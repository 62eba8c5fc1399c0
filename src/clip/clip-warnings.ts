import type { ClipInfo } from './clip-info.ts';
import { plainWords } from './clip-messages.ts';
import { lumaAccess } from './pixel-format.ts';
import type { InputListing } from './stream-listing.ts';

/** Pictures may end this much before the file does, s and as a fraction of their own length: sound often runs longer. */
const EARLY_END_S = 0.25;
const EARLY_END_FRACTION = 0.1;

/** Sentences on what the user should know of a clip before trusting a measurement from it. */
export function clipWarnings(
  clip: Omit<ClipInfo, 'warnings'>,
  listing: InputListing,
  orientationKnown: boolean,
  complaints: readonly string[],
): string[] {
  const warnings: string[] = [];
  if (clip.frameCount === 1) warnings.push('The clip has one frame only: no motion can be seen in it.');
  if (clip.regularity.variable) {
    const from = milliseconds(clip.regularity.shortestIntervalS);
    const to = milliseconds(clip.regularity.longestIntervalS);
    warnings.push(
      `The frame rate varies: ${from} to ${to} ms from frame to frame; each frame's own time is used.`,
    );
  }
  if (clip.gaps.length > 0) warnings.push(gapSentence(clip));
  if (clip.duplicates.length > 0) {
    warnings.push(`Frames with the same time as the frame before: ${clip.duplicates.length}.`);
  }
  if (clip.colour.hdr !== null) {
    warnings.push(
      `The clip is ${clip.colour.hdr} high dynamic range; brightness looks flat here, motion is unaffected.`,
    );
  }
  if (listing.video?.interlaced === true) {
    warnings.push(
      'The pictures are interlaced: two instants share a frame, film progressive for a trustworthy result.',
    );
  }
  if (!lumaAccess(clip.pixelFormat).exact) {
    warnings.push(
      `The pictures are stored as ${clip.pixelFormat}: brightness is computed from their colours.`,
    );
  }
  if (!orientationKnown)
    warnings.push('The clip is marked as turned by no right angle; it is shown as stored.');
  if (listing.videoStreams > 1) {
    warnings.push(`The file holds ${listing.videoStreams} video streams; the first is measured.`);
  }
  const damage = complaints.find((line) => /partial file|truncat|corrupt|premature|invalid/i.test(line));
  const endS = (clip.originTicks * clip.timeBase[0]) / clip.timeBase[1] + clip.durationS;
  const statedS = listing.endS ?? 0;
  const endsEarly = statedS - endS > Math.max(EARLY_END_S, EARLY_END_FRACTION * clip.durationS);
  if (damage !== undefined || endsEarly) {
    const said = damage === undefined ? '' : ` ("${plainWords(damage)}")`;
    const ends = endsEarly ? `, its pictures end ${(statedS - endS).toFixed(2)} s before it does` : '';
    warnings.push(`The file is damaged or cut off${said}${ends}; copy it anew from the camera if you can.`);
  }
  return warnings;
}

function gapSentence(clip: Omit<ClipInfo, 'warnings'>): string {
  const missing = clip.gaps.reduce((sum, gap) => sum + gap.missingFrames, 0);
  const longest = clip.gaps.reduce((a, b) => (b.intervalS > a.intervalS ? b : a));
  const at = (clip.timesS[longest.afterFrame] ?? 0).toFixed(2);
  return `${count(missing, 'frame')} missing in ${count(clip.gaps.length, 'gap')}, the longest ${milliseconds(longest.intervalS)} ms at ${at} s.`;
}

const milliseconds = (seconds: number | null): string => ((seconds ?? 0) * 1000).toFixed(1);
const count = (n: number, noun: string): string => `${n} ${noun}${n === 1 ? '' : 's'}`;
