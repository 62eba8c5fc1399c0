import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { readTest } from '../../src/testfile/read-test.ts';
import type { PointPx } from '../../src/testfile/schema.ts';
import { DEMO_FOLDER } from './journey.ts';

/** Where the demo's points are, px, and its scale length, mm: what a user would click and type. */
export function demoPoints(): {
  scaleFrom: PointPx;
  scaleTo: PointPx;
  length: number;
  response: PointPx;
  drive: PointPx;
} {
  const test = readTest(readFileSync(join(DEMO_FOLDER, 'demo.dwellbook'), 'utf8'), 'demo.dwellbook');
  const { scale, markers = [] } = test.setups[0] ?? {};
  const at = (role: string): PointPx => {
    const marker = markers.find((each) => each.role === role);
    if (!marker) throw new Error(`the demo test has no ${role} marker`);
    return marker.at;
  };
  if (!scale) throw new Error('the demo test has no scale');
  return {
    scaleFrom: scale.from,
    scaleTo: scale.to,
    length: scale.length,
    response: at('response'),
    drive: at('drive'),
  };
}

/** Natural frequency, Hz, and damping ratio of the rig that a configuration of the demo was drawn from. */
export function demoTruth(index: number): { naturalHz: number; dampingRatio: number } {
  const truth = JSON.parse(readFileSync(join(DEMO_FOLDER, 'truth.json'), 'utf8')) as {
    configurations: { naturalHz: number; dampingRatio: number }[];
  };
  const found = truth.configurations[index];
  if (!found) throw new Error(`the demo's truth has no configuration ${index}`);
  return found;
}
