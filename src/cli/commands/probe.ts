import { probeClip } from '../../clip/probe.ts';
import { clipFactsJson, clipText } from '../../report/clip-text.ts';
import { EXIT } from '../exit-status.ts';
import { interruptSignal } from '../interrupt.ts';

/** `probe CLIP`: prints what a clip is. Returns the exit status. */
export async function probe(path: string, options: { readonly json?: true }): Promise<number> {
  const { signal, release } = interruptSignal();
  try {
    const info = await probeClip(path, { signal });
    process.stdout.write(options.json ? `${JSON.stringify(clipFactsJson(info), null, 2)}\n` : clipText(info));
    return EXIT.ok;
  } finally {
    release();
  }
}
