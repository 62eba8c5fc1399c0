import { Command, CommanderError, InvalidArgumentError } from 'commander';
import { PROGRAM } from '../engine/program.ts';
import { CancelledError, InputError } from '../errors.ts';
import { demo } from './commands/demo.ts';
import { fit as fitCommand } from './commands/fit.ts';
import { measure } from './commands/measure.ts';
import { plan } from './commands/plan.ts';
import { probe } from './commands/probe.ts';
import { report } from './commands/report.ts';
import { EXIT } from './exit-status.ts';

/** A path argument; an empty one is a mistake in a script, not the current folder. */
function path(value: string): string {
  if (value === '') throw new InvalidArgumentError('the path is empty.');
  return value;
}

function program(setStatus: (status: number) => void): Command {
  const root = new Command('dwellbook')
    .description('Sine-dwell tests from phone clips: amplitude per drive frequency, and the resonance.')
    .version(PROGRAM.split(' ')[1] ?? '', '-V, --version', 'print the version')
    .exitOverride()
    .configureOutput({ outputError: (text, write) => write(text) });
  const json = ['--json', 'print JSON on standard output and nothing else there'] as const;

  root
    .command('measure')
    .description('measure every dwell and ring-down of a test file and fit every configuration')
    .argument('<test>', 'test file (NAME.dwellbook)', path)
    .option('--out <dir>', 'write results.json, dwells.csv, report.html and motion/CLIP.csv here', path)
    .option('--save', 'keep the measured amplitudes in the test file, for fit and plan')
    .option('--refine', 'second pass with a template averaged over the clip (slower, finer)')
    .option(...json)
    .action(async (test: string, options: { out?: string; json?: true; save?: true; refine?: true }) => {
      setStatus(await measure(test, options));
    });
  root
    .command('fit')
    .description('fit the resonance from amplitudes that are in the test file, no clip read')
    .argument('<test>', 'test file', path)
    .option(...json)
    .action(async (test: string, options: { json?: true }) => {
      setStatus(await fitCommand(test, options));
    });
  root
    .command('plan')
    .description('print run sheet advice: waiting and filming times, next drive frequencies, travel limit')
    .argument('<test>', 'test file', path)
    .option(...json)
    .action(async (test: string, options: { json?: true }) => {
      setStatus(await plan(test, options));
    });
  root
    .command('probe')
    .description('print what a clip is: codec, size, frame times, gaps, capture rate, warnings')
    .argument('<clip>', 'video file', path)
    .option(...json)
    .action(async (clip: string, options: { json?: true }) => {
      setStatus(await probe(clip, options));
    });
  root
    .command('report')
    .description('measure a test and write its report')
    .argument('<test>', 'test file', path)
    .requiredOption('--out <file>', 'the report: FILE.html, or FILE.pdf where a Chromium is there', path)
    .action(async (test: string, options: { out: string }) => {
      setStatus(await report(test, options));
    });
  root
    .command('demo')
    .description('measure the bundled demo test and show the result')
    .option('--out <dir>', 'write the results here', path)
    .action(async (options: { out?: string }) => {
      setStatus(await demo(options));
    });
  return root;
}

/**
 * Runs the command line.
 * @param args the arguments after the program's name
 * @returns the exit status: 0 all done, 1 some dwell could not be measured, 2 unusable call or test file
 */
export async function run(args: readonly string[]): Promise<number> {
  let status: number = EXIT.ok;
  try {
    await program((value) => {
      status = value;
    }).parseAsync([...args], { from: 'user' });
    return status;
  } catch (error) {
    if (error instanceof CommanderError) return error.exitCode === 0 ? EXIT.ok : EXIT.unusable;
    if (error instanceof CancelledError) {
      process.stderr.write('Stopped; nothing was written.\n');
      return EXIT.interrupted;
    }
    if (error instanceof InputError) {
      process.stderr.write(`${error.message}\n`);
      return EXIT.unusable;
    }
    throw error;
  }
}
