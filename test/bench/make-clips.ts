import { existsSync } from 'node:fs';
import { mkdir, readFile, rename, writeFile } from 'node:fs/promises';
import { join, resolve } from 'node:path';
import type { Camera, Scene } from '../../fixtures/render/camera.ts';
import type { Encoding } from '../../fixtures/render/encoding.ts';
import { renderClip } from '../../fixtures/render/render-clip.ts';
import { steadyDwell } from '../../fixtures/render/rig-motion.ts';
import { breadboardRig } from '../../fixtures/rig/breadboard-rig.ts';
import { testFile } from './bench-test-file.ts';
import type { BenchOptions } from './options.ts';

/** A clip to measure, with a test file that asks for one marker and one that asks for three. */
export interface BenchClip {
  readonly name: string;
  readonly file: string;
  readonly oneMarker: string;
  readonly threeMarkers: string;
  readonly frames: number;
  readonly mbitPerS: number;
  /** True amplitude of the response, mm. */
  readonly amplitudeMm: number;
}

/** What is kept beside a clip that has been drawn. */
type CachedClip = Pick<BenchClip, 'amplitudeMm'>;

const FPS = 60;
// 24 frames a period: the scene repeats, and only the noise has to be drawn anew.
const DRIVE_HZ = 2.5;
const NOISE_DN = 2;
const CACHE = resolve('.cache/bench');

const CODECS: readonly { readonly name: string; readonly encoding: Encoding }[] = [
  { name: 'H.264', encoding: { codec: 'h264', mbitPerS: 20, bFrames: 0 } },
  { name: 'HEVC', encoding: { codec: 'hevc', mbitPerS: 15, bFrames: 0 } },
];

/** The bench's clips, drawn on first use and kept outside the repository. */
export async function benchClips(options: BenchOptions): Promise<BenchClip[]> {
  const [widthPx, heightPx] = options.short ? [640, 360] : [1920, 1080];
  const frames = Math.round(options.seconds * FPS);
  await mkdir(CACHE, { recursive: true });
  let scene: Scene | null = null;
  const clips: BenchClip[] = [];
  for (const { name, encoding } of CODECS) {
    const mbitPerS = encoding.mbitPerS! * (options.short ? 0.15 : 1);
    const key = `${encoding.codec}-${heightPx}p${FPS}-${frames}-frames-${mbitPerS}M`;
    const description = join(CACHE, `${key}.json`);
    if (!existsSync(description)) {
      console.error(`drawing ${key}, once`);
      scene ??= breadboardRig({ widthPx, heightPx, busy: true });
      await draw(scene, { ...encoding, mbitPerS }, frames, key, description);
    }
    const known = JSON.parse(await readFile(description, 'utf8')) as CachedClip;
    clips.push({
      name,
      file: join(CACHE, `${key}.mp4`),
      oneMarker: testFilePath(key, 1),
      threeMarkers: testFilePath(key, 3),
      frames,
      mbitPerS,
      ...known,
    });
  }
  return clips;
}

async function draw(
  scene: Scene,
  encoding: Encoding,
  frames: number,
  key: string,
  description: string,
): Promise<void> {
  const motion = steadyDwell({ naturalHz: 2.7, dampingRatio: 0.05, staticGain: 1 }, DRIVE_HZ, 0.8);
  const period = FPS / DRIVE_HZ;
  const camera: Camera = { captureFps: FPS, frames, seed: 7, noiseDn: NOISE_DN, repeatEvery: period };
  const file = join(CACHE, `${key}.mp4`);
  // Written aside and renamed, so that a run cut short leaves nothing that looks complete.
  const part = join(CACHE, `${key}.part.mp4`);
  const truth = await renderClip(scene, motion, camera, part, encoding);
  await rename(part, file);
  const markers = ['response', 'drive', 'ground'] as const;
  for (const count of [1, 3] as const) {
    const text = testFile(scene, truth, `${key}.mp4`, DRIVE_HZ, markers.slice(0, count));
    await writeFile(testFilePath(key, count), text);
  }
  const known: CachedClip = { amplitudeMm: truth.steady!.amplitudeMm };
  await writeFile(description, JSON.stringify(known));
}

function testFilePath(key: string, markers: 1 | 3): string {
  return join(CACHE, `${key}-${markers}.dwellbook`);
}
