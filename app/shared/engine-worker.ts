import { parentPort } from 'node:worker_threads';
import { planTest } from '../../src/engine/plan-test.ts';
import { trackTest } from '../../src/engine/track-test.ts';
import { findClips } from '../../src/testfile/find-clips.ts';
import { ClipReader, clipView } from './clip-reader.ts';
import { compareAnswer } from './compare-answer.ts';
import { EvaluatingSession } from './evaluate-session.ts';
import { frameRun } from './frame-run.ts';
import { serveEngine } from './serve-engine.ts';
import { SpotJudge } from './spot-in-clip.ts';

// The engine's thread: decoding, tracking and fitting happen here and nowhere else.

if (!parentPort) throw new Error('the engine runs in a worker thread');

const clips = new ClipReader();
const spots = new SpotJudge();
const session = new EvaluatingSession();

serveEngine(parentPort, {
  probe: async ({ path }, { signal }) => clipView(await clips.info(path, signal)),
  frames: async ({ path, ...options }, { signal, progress }) =>
    frameRun(await clips.info(path, signal), await clips.ffmpeg(), { ...options, signal }, progress),
  judgeSpot: async ({ path, ...spot }, { signal }) =>
    spots.judge(await clips.info(path, signal), await clips.ffmpeg(), spot, signal),
  track: async ({ test, testPath, clip }, { signal, progress }) => {
    const outcomes = await trackTest(test, { testPath, only: new Set([clip]), signal, onProgress: progress });
    return outcomes.get(clip) ?? { clip, error: `No dwell uses the clip "${clip}"; add it to a run sheet.` };
  },
  holdTracks: async ({ tracks }) => {
    session.hold(tracks);
    return null;
  },
  evaluate: async ({ test, clips: keyed }) => session.evaluate(test, keyed),
  plan: async ({ test, results }) => planTest(test, results),
  compare: async ({ test, results }) => compareAnswer(test, results),
  report: async ({ test }) => session.report(test),
  motion: async ({ clip }) => session.motion(clip),
  findClips: async ({ folder, wanted }, { signal }) => findClips(folder, wanted, { signal }),
});
