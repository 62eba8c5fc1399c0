// Starts the executable named on the command line, prints its process id, and leaves without waiting for it.
import { execFileSync } from 'node:child_process';
import { runFfmpeg } from '../../src/clip/run-ffmpeg.ts';

void runFfmpeg(process.argv[2] ?? '', [], {
  onOutput: () => {
    process.stdout.write(execFileSync('pgrep', ['-P', String(process.pid), '-f', 'tail|refuses']).toString());
    process.exit(0);
  },
});
