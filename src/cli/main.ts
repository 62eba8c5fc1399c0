import { run } from './run.ts';

// A reader that closes the pipe early (`dwellbook ... | head`) is no fault of ours.
process.stdout.on('error', (error: NodeJS.ErrnoException) => {
  if (error.code === 'EPIPE') process.exit(0);
  throw error;
});

run(process.argv.slice(2)).then(
  (status) => {
    process.exitCode = status;
  },
  (error: unknown) => {
    const message = error instanceof Error ? error.message : String(error);
    process.stderr.write(
      `Dwellbook met a fault of its own: ${message}\nPlease report it with the command you ran.\n`,
    );
    if (process.env['DWELLBOOK_DEBUG'] && error instanceof Error)
      process.stderr.write(`${error.stack ?? ''}\n`);
    process.exitCode = 2;
  },
);
