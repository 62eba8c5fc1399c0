import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { Bench, type BenchParts } from '../../app/shared/bench.ts';
import type { BenchEvent } from '../../app/shared/bench-state.ts';
import type { Engine } from '../../app/shared/engine.ts';
import { UserFolder } from '../../app/shared/user-folder.ts';
import { fitTest } from '../../src/engine/fit-test.ts';
import { FakeEngine } from './fake-engine.ts';

/** A bench in a folder of its own, for a test. */
export interface TestBench {
  readonly bench: Bench;
  readonly folder: string;
  readonly events: BenchEvent[];
  readonly end: () => Promise<void>;
}

/** What a clip looks like to an engine that is asked only for that. */
export const SMALL_CLIP = {
  ...{ frameCount: 10, timesS: Array.from({ length: 10 }, (_, k) => k / 10), width: 64, height: 48 },
  ...{ codec: 'h264', frameRate: 10, captureFps: null, warnings: [] },
};

/** An engine that fits and knows clips, without decoding any. */
export function fittingEngine(): FakeEngine {
  return new FakeEngine({
    evaluate: ({ test }) => ({ results: fitTest(test), wanting: null }),
    plan: () => [],
    probe: () => SMALL_CLIP,
  });
}

/** Makes a bench whose files lie in a temporary folder. */
export async function makeTestBench(
  parts: Partial<BenchParts> & { engine?: Engine; folder?: string } = {},
): Promise<TestBench> {
  const folder = parts.folder ?? (await mkdtemp(join(tmpdir(), 'dwellbook-bench-')));
  const engine = parts.engine ?? fittingEngine();
  const userFolder = new UserFolder(join(folder, 'user'));
  await userFolder.load();
  const bench = new Bench({
    host: { kind: 'loopback', nativeDialogs: false, program: 'Dwellbook' },
    ...{ quickEngine: engine, measuringEngine: engine, evaluatingEngine: engine },
    userFolder,
    testsFolder: join(folder, 'tests'),
    demoFolder: join(folder, 'demo'),
    browseRoots: [folder],
    ...parts,
  });
  const events: BenchEvent[] = [];
  bench.subscribe((event) => events.push(event));
  return {
    bench,
    folder,
    events,
    end: async () => {
      await bench.close();
      await rm(folder, { recursive: true, force: true });
    },
  };
}
