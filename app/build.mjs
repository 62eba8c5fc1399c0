/**
 * Builds the program into dist/: `node app/build.mjs` everything, `node app/build.mjs cli` (or worker, start, main,
 * preload, page) a part. Packages stay outside the bundles and are loaded from node_modules; the page holds its own.
 */
import { existsSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { build } from 'esbuild';

const root = dirname(dirname(fileURLToPath(import.meta.url)));

/** Bundled entries: name, source, output, and what differs from a plain Node module. */
const BUNDLES = [
  { name: 'cli', entry: 'src/cli/main.ts', out: 'dist/cli.js', banner: '#!/usr/bin/env node' },
  { name: 'worker', entry: 'app/shared/engine-worker.ts', out: 'dist/engine-worker.js' },
  { name: 'start', entry: 'app/start.ts', out: 'dist/start.js', banner: '#!/usr/bin/env node' },
  { name: 'main', entry: 'app/main/main.ts', out: 'dist/main.js' },
  // A sandboxed preload script has no module loader: one CommonJS file.
  { name: 'preload', entry: 'app/preload/preload.ts', out: 'dist/preload.cjs', format: 'cjs' },
];

async function buildBundle({ entry, out, banner, format = 'esm' }) {
  await build({
    entryPoints: [join(root, entry)],
    outfile: join(root, out),
    bundle: true,
    platform: 'node',
    target: 'node20',
    format,
    packages: 'external',
    sourcemap: 'linked',
    logLevel: 'warning',
    legalComments: 'none',
    ...(banner ? { banner: { js: banner } } : {}),
  });
}

async function buildPage() {
  const { build: viteBuild } = await import('vite');
  await viteBuild({ configFile: join(root, 'app/page/vite.config.ts'), logLevel: 'warn' });
}

const wanted = process.argv.slice(2);
const known = [...BUNDLES.map((each) => each.name), 'page'];
const unknown = wanted.find((name) => !known.includes(name));
if (unknown !== undefined) {
  console.error(`There is no part "${unknown}" to build; the parts are ${known.join(', ')}.`);
  process.exit(2);
}
const parts = wanted.length > 0 ? wanted : known;

for (const bundle of BUNDLES) {
  if (!parts.includes(bundle.name)) continue;
  if (!existsSync(join(root, bundle.entry))) {
    console.error(`${bundle.entry} is not there: ${bundle.out} is not built.`);
    process.exitCode = 1;
    continue;
  }
  await buildBundle(bundle);
}
if (parts.includes('page')) {
  if (existsSync(join(root, 'app/page/vite.config.ts'))) await buildPage();
  else {
    console.error('app/page/vite.config.ts is not there: the page is not built.');
    process.exitCode = 1;
  }
}
