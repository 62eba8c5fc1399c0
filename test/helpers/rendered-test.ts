import { writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { Camera, Scene } from '../../fixtures/render/camera.ts';
import { type ClipTruth, renderClip } from '../../fixtures/render/render-clip.ts';
import { type Rig, type RigMotion, steadyDwell } from '../../fixtures/render/rig-motion.ts';
import { breadboardRig } from '../../fixtures/rig/breadboard-rig.ts';

/** The rig that small test clips show. */
export const RIG: Rig = { naturalHz: 3.1, dampingRatio: 0.05, staticGain: 1 };

/** One clip to render. */
export interface RenderedDwell {
  readonly id: string;
  readonly driveHz: number;
  readonly motion?: RigMotion;
  readonly camera?: Partial<Camera>;
}

/** A small test on disk with the truth behind it. */
export interface RenderedTest {
  readonly path: string;
  /** The test file's content, to change and write again. */
  readonly test: TestJson;
  readonly truths: ReadonlyMap<string, ClipTruth>;
  readonly scene: Scene;
}

/** A test file as plain data that a test may bend out of shape. */
// biome-ignore lint/suspicious/noExplicitAny: tests write wrong types on purpose
export type TestJson = Record<string, any>;

const DRIVE_MM = 2;

/** Renders one small clip per dwell into a folder and writes the test file that measures them. */
export async function renderTest(
  folder: string,
  dwells: readonly RenderedDwell[],
  widthPx = 320,
): Promise<RenderedTest> {
  const scene = breadboardRig({ widthPx, heightPx: (widthPx * 9) / 16 });
  const truths = new Map<string, ClipTruth>();
  for (const [k, dwell] of dwells.entries()) {
    const camera: Camera = {
      captureFps: 60,
      frames: 90,
      seed: 40 + k,
      exposureS: 0.002,
      instants: 3,
      ...dwell.camera,
    };
    const motion = dwell.motion ?? steadyDwell(RIG, dwell.driveHz, DRIVE_MM, 0.4 + k);
    truths.set(dwell.id, await renderClip(scene, motion, camera, join(folder, `${dwell.id}.mp4`)));
  }
  const first = truths.get(dwells[0]?.id ?? '');
  const marker = (id: string, role: string) => ({
    id,
    role,
    at: [first?.tracks[role]?.xPx[0], first?.tracks[role]?.yPx[0]],
  });
  const test: TestJson = {
    format: 'dwellbook-test',
    version: 1,
    title: 'Rendered test',
    setups: [
      {
        id: 'tripod',
        scale: {
          from: scene.scale.fromPx,
          to: scene.scale.toPx,
          length: scene.scale.lengthMm,
          lengthU: 0.1,
          clickU: 0.1,
        },
        motionAxis: 'auto',
        markers: [marker('board', 'response'), marker('table', 'drive'), marker('post', 'ground')],
      },
    ],
    clips: dwells.map((dwell) => ({
      id: dwell.id,
      file: `${dwell.id}.mp4`,
      setup: 'tripod',
      exposure: dwell.camera?.exposureS ?? 0.002,
    })),
    configurations: [
      {
        id: 'a',
        label: 'as built',
        excitation: 'spring-end',
        dwells: dwells.map((dwell) => ({ id: `d-${dwell.id}`, driveHz: dwell.driveHz, clip: dwell.id })),
      },
    ],
  };
  const path = join(folder, 'test.dwellbook');
  await writeFile(path, JSON.stringify(test));
  return { path, test, truths, scene };
}
