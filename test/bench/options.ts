/** What a run of the bench measures. */
export interface BenchOptions {
  /** A smoke test: tiny clips, one round. Its figures mean nothing. */
  readonly short: boolean;
  /** Rounds in which everything is measured in turn; medians are told. */
  readonly rounds: number;
  /** Length of the clips, s. */
  readonly seconds: number;
  /** The command line under test. */
  readonly cli: string;
}

/**
 * Reads the bench's own arguments: `--short`, `--rounds N`, `--seconds N`, `--cli FILE`.
 * @throws Error at anything else
 */
export function readOptions(args: readonly string[]): BenchOptions {
  const short = args.includes('--short');
  const options = { short, rounds: short ? 1 : 5, seconds: short ? 1 : 20, cli: 'dist/cli.js' };
  for (let n = 0; n < args.length; n++) {
    const [name, value] = [args[n]!, args[n + 1]];
    if (name === '--short') continue;
    if (name === '--cli' && value) options.cli = value;
    else if (name === '--rounds' && Number(value) >= 1) options.rounds = Math.round(Number(value));
    else if (name === '--seconds' && Number(value) > 0) options.seconds = Number(value);
    else
      throw new Error(
        `The bench takes --short, --rounds N, --seconds N and --cli FILE, not "${name} ${value}".`,
      );
    n++;
  }
  return options;
}
