import { dirname, join } from 'node:path';
import { makeBench, TESTS_FOLDER } from '../shared/make-bench.ts';
import { defaultUserFolder } from '../shared/user-folder.ts';
import { openInBrowser } from './open-in-browser.ts';
import { LoopbackServer } from './server.ts';

/** How to run the loopback host. */
export interface LoopbackRun {
  /** The folder of the built program. */
  readonly dist: string;
  /** A test file to open, or clips to take in. */
  readonly files: readonly string[];
  readonly openBrowser: boolean;
}

/** Serves the bench until its page has gone or the process is asked to end; prints the address. */
export async function runLoopback({ dist, files, openBrowser }: LoopbackRun): Promise<void> {
  const { env } = process;
  const testsFolder = env['DWELLBOOK_TESTS'] ?? TESTS_FOLDER;
  const bench = await makeBench({
    host: { kind: 'loopback', nativeDialogs: false, program: 'Dwellbook' },
    dist,
    userFolder: defaultUserFolder(env),
    demoFolder: env['DWELLBOOK_DEMO'] ?? join(dirname(dist), 'fixtures', 'demo'),
    testsFolder,
    browseRoots: [process.cwd(), ...files.map((file) => dirname(file))],
  });
  const debug = env['DWELLBOOK_DEBUG'] !== undefined;
  const onFault = (error: unknown): void => {
    const told = error instanceof Error ? (debug ? error.stack : error.message) : String(error);
    console.error(`Dwellbook met a fault of its own: ${told}`);
  };
  let ending = false;
  const end = async (): Promise<void> => {
    if (ending) return;
    ending = true;
    await server.close();
    await bench.close();
    process.exit(0);
  };
  const server = new LoopbackServer({
    bench,
    pageFolder: join(dist, 'page'),
    testsFolder,
    onGone: () => void end(),
    onFault,
  });
  const address = await server.listen();
  process.once('SIGINT', () => void end());
  process.once('SIGTERM', () => void end());
  if (files.length > 0) await bench.handlers.takeIn({ paths: [...files] }).catch(onFault);
  console.log(`The bench is at ${address}`);
  console.log('The address works once. The bench ends when its page is closed, or with Ctrl-C.');
  if (openBrowser) openInBrowser(address, env, process.platform);
}
