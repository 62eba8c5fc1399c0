import { homedir } from 'node:os';
import { join } from 'node:path';
import { Bench, type BenchParts } from './bench.ts';
import type { HostFacts } from './bench-state.ts';
import { UserFolder } from './user-folder.ts';
import { WorkerEngine } from './worker-engine.ts';

/** What differs between the hosts. */
export interface BenchPlaces {
  readonly host: HostFacts;
  /** The folder of the built program. */
  readonly dist: string;
  readonly userFolder: string;
  /** The project's or the packed program's folder of demo clips. */
  readonly demoFolder: string;
  readonly testsFolder?: string;
  /** Folders that may be looked into besides the user's own. */
  readonly browseRoots?: readonly string[];
  readonly choosePaths?: BenchParts['choosePaths'];
}

/** Where a user's tests are made when nothing else is said. */
export const TESTS_FOLDER = join(homedir(), 'Dwellbook');

/** A bench with its engines in worker threads, as both hosts run it. */
export async function makeBench(places: BenchPlaces): Promise<Bench> {
  const userFolder = new UserFolder(places.userFolder);
  await userFolder.load();
  const script = join(places.dist, 'engine-worker.js');
  const testsFolder = places.testsFolder ?? TESTS_FOLDER;
  return new Bench({
    host: places.host,
    quickEngine: new WorkerEngine(script),
    measuringEngine: new WorkerEngine(script),
    evaluatingEngine: new WorkerEngine(script),
    userFolder,
    testsFolder,
    demoFolder: places.demoFolder,
    browseRoots: [homedir(), testsFolder, userFolder.path, ...(places.browseRoots ?? [])],
    ...(places.choosePaths ? { choosePaths: places.choosePaths } : {}),
  });
}
