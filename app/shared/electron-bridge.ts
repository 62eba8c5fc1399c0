import type { CallOutcome } from './answers.ts';
import type { BenchEvent } from './bench-state.ts';

/** Channel of the calls, page to main. */
export const CALL_CHANNEL = 'dwellbook:call';
/** Channel of the events, main to page. */
export const EVENT_CHANNEL = 'dwellbook:event';

/** All that preload gives to the page: it hands over no channel names and no event objects. */
export interface ElectronBridge {
  call(name: string, input: unknown): Promise<CallOutcome>;
  subscribe(listener: (event: BenchEvent) => void): void;
  /** Path of a file that the user dropped or chose; empty where it has none. The file is a DOM `File`. */
  pathOf(file: unknown): string;
}
