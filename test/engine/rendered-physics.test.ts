import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Camera } from '../../fixtures/render/camera.ts';
import type { Encoding } from '../../fixtures/render/encoding.ts';
import { type ClipTruth, renderClip } from '../../fixtures/render/render-clip.ts';
import { dwellFromRest, steadyDwell } from '../../fixtures/render/rig-motion.ts';
import { breadboardRig } from '../../fixtures/rig/breadboard-rig.ts';
import { measureTest } from '../../src/engine/measure-test.ts';
import type { DwellResult } from '../../src/engine/results.ts';
import { readTest } from '../../src/testfile/read-test.ts';
import { hasEncoder } from '../helpers/make-clip.ts';

/** One way of filming, with the drive it films. */
interface Case {
  readonly name: string;
  readonly driveHz: number;
  readonly driveMm?: number;
  readonly camera?: Partial<Camera>;
  readonly encoding?: Encoding;
  readonly tiltDeg?: number;
  readonly fromRest?: boolean;
  /** What the test file says of the clip beside its exposure. */
  readonly says?: Record<string, number>;
}

const RIG = { naturalHz: 3.2, dampingRatio: 0.06, staticGain: 1 };

const shake = (timeS: number): readonly [number, number] => [
  2.5 * Math.sin(7.1 * timeS) + 1.1 * Math.sin(23 * timeS + 1),
  1.8 * Math.cos(5.3 * timeS + 0.4),
];

// At least 24 ways of filming; the physics of each is in the name.
const CASES: readonly Case[] = [
  { name: 'well below resonance', driveHz: 2.1, driveMm: 6 },
  { name: 'just below resonance', driveHz: 3.0 },
  { name: 'at resonance', driveHz: 3.2, driveMm: 1.5 },
  { name: 'just above resonance', driveHz: 3.4 },
  { name: 'well above resonance', driveHz: 4.6, driveMm: 6 },
  {
    name: 'exposure of a tenth of a period',
    driveHz: 3.1,
    camera: { captureFps: 30, exposureS: 0.032, instants: 16 },
  },
  {
    name: 'exposure of half a frame at 8 Hz',
    driveHz: 8,
    driveMm: 12,
    camera: { exposureS: 0.0083, instants: 8 },
  },
  { name: 'noise of 3 steps', driveHz: 3.0, camera: { noiseDn: 3 } },
  { name: 'camera 4 degrees out of level', driveHz: 3.1, tiltDeg: 4 },
  { name: 'camera 20 degrees out of level', driveHz: 3.1, tiltDeg: 20 },
  { name: 'hand-held', driveHz: 3.1, camera: { shakePx: shake } },
  {
    name: 'rolling shutter across the motion',
    driveHz: 3.1,
    camera: { rowReadoutS: 0.014 },
    says: { rowReadout: 0.014 },
  },
  { name: 'portrait, stored turned', driveHz: 3.1, camera: { rotationDeg: 90 } },
  { name: 'upside down, stored turned', driveHz: 3.1, camera: { rotationDeg: 180 } },
  { name: 'uneven frame times', driveHz: 3.1, camera: { jitterS: 0.003 } },
  { name: 'dropped frames', driveHz: 3.1, camera: { dropped: [11, 12, 40, 41, 42, 77] } },
  {
    name: 'slow motion stored stretched four times',
    driveHz: 3.1,
    camera: { captureFps: 120, fileFps: 30, frames: 240 },
    says: { captureFps: 120 },
  },
  {
    name: 'a drive above half the frame rate',
    driveHz: 3.1,
    camera: { captureFps: 5, frames: 100 },
  },
  { name: 'B-frames', driveHz: 3.1, encoding: { codec: 'h264', bFrames: 2 } },
  { name: 'HEVC', driveHz: 3.1, encoding: { codec: 'hevc' } },
  { name: 'HEVC of 10 bits', driveHz: 3.1, encoding: { codec: 'hevc', tenBit: true } },
  { name: 'low bitrate', driveHz: 3.1, encoding: { codec: 'h264', quality: 28 } },
  { name: 'vignette', driveHz: 3.1, camera: { vignette: 0.3 } },
  { name: 'filmed from rest, transient still there', driveHz: 3.1, camera: { frames: 180 }, fromRest: true },
];

let folder = '';
beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'dwellbook-physics-'));
});
afterAll(async () => {
  await rm(folder, { recursive: true, force: true });
});

async function measureCase(each: Case, number: number): Promise<{ truth: ClipTruth; dwell: DwellResult }> {
  const scene = breadboardRig({
    widthPx: 480,
    heightPx: 270,
    tiltDeg: each.tiltDeg ?? 0,
    shakePx: each.camera?.shakePx ? 6 : 0,
  });
  const camera: Camera = {
    captureFps: 60,
    frames: 120,
    seed: 700 + number,
    exposureS: 0.002,
    instants: 4,
    ...each.camera,
  };
  const make = each.fromRest ? dwellFromRest : steadyDwell;
  const motion = each.fromRest
    ? make(RIG, each.driveHz, each.driveMm ?? 2, 0.1, 0.3 + number)
    : make(RIG, each.driveHz, each.driveMm ?? 2, 0.3 + number);
  const file = join(folder, `c${number}.mp4`);
  const truth = await renderClip(
    scene,
    motion,
    camera,
    file,
    each.encoding ?? { codec: 'h264', quality: 16 },
  );
  const at = (name: string) => [truth.tracks[name]?.xPx[0], truth.tracks[name]?.yPx[0]];
  const test = readTest(
    JSON.stringify({
      format: 'dwellbook-test',
      version: 1,
      setups: [
        {
          id: 's',
          // exact points: the scale is not what is tested here
          scale: {
            from: scene.scale.fromPx,
            to: scene.scale.toPx,
            length: scene.scale.lengthMm,
            lengthU: 0.02,
            clickU: 0.02,
          },
          markers: [
            { id: 'r', role: 'response', at: at('response') },
            { id: 'd', role: 'drive', at: at('drive') },
            { id: 'g', role: 'ground', at: at('ground') },
          ],
        },
      ],
      clips: [{ id: 'c', file, setup: 's', exposure: camera.exposureS, rowReadout: 0, ...each.says }],
      configurations: [
        { id: 'k', excitation: 'spring-end', dwells: [{ id: 'd', driveHz: each.driveHz, clip: 'c' }] },
      ],
    }),
    'case',
  );
  const { results } = await measureTest(test, { testPath: join(folder, 'case.dwellbook') });
  const dwell = results.dwells[0];
  if (!dwell) throw new Error('no dwell came back');
  return { truth, dwell };
}

describe('whole program against clips drawn from the exact solution', () => {
  const outcomes: { inside: boolean; lagInside: boolean }[] = [];

  it.each(CASES.map((each, number) => ({ ...each, number })))('$name', async (each) => {
    if (each.encoding && !hasEncoder(each.encoding.codec === 'hevc' ? 'libx265' : 'libx264')) {
      console.warn(
        `${each.name}: this ffmpeg cannot encode ${each.encoding.codec}, so the clip cannot be made here`,
      );
      return;
    }
    const { truth, dwell } = await measureCase(each, each.number);
    const steady = truth.steady;
    if (!steady) throw new Error('a dwell has a steady state');
    expect(dwell.error).toBeNull();
    const { value: amplitude } = dwell.amplitude;
    const { value: lag } = dwell.lag;
    // compression at this size leaves some 0.02 px
    const tolerancePx = Math.max(0.02, 0.003 * (dwell.amplitudePx ?? 0));
    const pxPerMm = (dwell.amplitudePx ?? 0) / (amplitude ?? 1);
    expect(Math.abs((amplitude ?? 0) - steady.amplitudeMm) * pxPerMm).toBeLessThan(tolerancePx);
    expect(Math.abs((lag ?? 0) - steady.lagDeg)).toBeLessThan(0.8);
    outcomes.push({
      inside: Math.abs((amplitude ?? 0) - steady.amplitudeMm) <= (dwell.amplitudeU95 ?? 0),
      lagInside: Math.abs((lag ?? 0) - steady.lagDeg) <= (dwell.lagU95 ?? 0),
    });
  });

  it('the stated 95 % intervals hold the truth in at least nine of ten clips', () => {
    expect(outcomes.length).toBeGreaterThanOrEqual(20);
    const share = (of: (each: { inside: boolean; lagInside: boolean }) => boolean): number =>
      outcomes.filter(of).length / outcomes.length;
    expect(share((each) => each.inside)).toBeGreaterThanOrEqual(0.9);
    expect(share((each) => each.lagInside)).toBeGreaterThanOrEqual(0.9);
  });
});
