import type { Scene } from '../../fixtures/render/camera.ts';
import type { ClipTruth } from '../../fixtures/render/render-clip.ts';

/** A test file with one dwell, asking for these markers of the scene. */
export function testFile(
  scene: Scene,
  truth: ClipTruth,
  clip: string,
  driveHz: number,
  markers: readonly ('response' | 'drive' | 'ground')[],
): string {
  const { scale } = scene;
  return JSON.stringify(
    {
      format: 'dwellbook-test',
      version: 1,
      title: 'bench',
      setups: [
        {
          id: 'tripod',
          scale: { from: scale.fromPx, to: scale.toPx, length: scale.lengthMm },
          motionAxis: 'auto',
          markers: markers.map((role) => ({
            id: role,
            role,
            at: [truth.tracks[role]!.xPx[0], truth.tracks[role]!.yPx[0]],
            frame: 0,
            clip: 'c1',
          })),
        },
      ],
      clips: [{ id: 'c1', file: clip, setup: 'tripod', exposure: 0.004 }],
      configurations: [
        {
          id: 'bench',
          label: 'bench',
          excitation: 'spring-end',
          dwells: [{ id: 'd1', driveHz, clip: 'c1' }],
        },
      ],
    },
    null,
    2,
  );
}
