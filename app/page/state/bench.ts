import { batch, computed, signal } from '@preact/signals';
import type { Edit } from '../../../src/testfile/edit-schema.ts';
import type { BenchEvent, BenchState, Notice } from '../../shared/bench-state.ts';
import type { InputOf, OperationName, OutputOf } from '../../shared/operations.ts';
import { CallError } from '../bridge/bench-client.ts';
import { connect } from '../bridge/connect.ts';

/** The mirror of the host's state; null until it has come. */
export const bench = signal<BenchState | null>(null);
/** Whether the host answers. */
export const connected = signal(true);
/** What there is to tell, newest last. */
export const notices = signal<readonly (Notice & { readonly id: number })[]>([]);

export const test = computed(() => bench.value?.test ?? null);
export const results = computed(() => bench.value?.results ?? null);
export const job = computed(() => bench.value?.job ?? null);
export const preferences = computed(() => bench.value?.preferences ?? null);

export const client = connect();
const commandListeners = new Set<(command: string) => void>();
let noticeCount = 0;

/** Shows a notice until it is put away; the same text is not shown twice at once. */
export function notify(level: Notice['level'], text: string): void {
  if (notices.value.some((each) => each.text === text)) return;
  notices.value = [...notices.value.slice(-4), { id: ++noticeCount, level, text }];
}

/** Puts a notice away. */
export function dismissNotice(id: number): void {
  notices.value = notices.value.filter((each) => each.id !== id);
}

/** Listens to commands of the host's menu. */
export function onCommand(listener: (command: string) => void): void {
  commandListeners.add(listener);
}

function receive(event: BenchEvent): void {
  if (event.type === 'notice') notify(event.notice.level, event.notice.text);
  else if (event.type === 'command') for (const listener of commandListeners) listener(event.command);
  else if (bench.value) bench.value = { ...bench.value, ...event.patch };
  else if (event.patch.host) bench.value = event.patch as BenchState;
}

/** Starts to mirror the host's state. */
export function startMirror(): void {
  client.subscribe(
    (event) => batch(() => receive(event)),
    (isConnected) => {
      connected.value = isConnected;
    },
  );
}

/** Calls an operation; what goes wrong is told to the user and answered with null. */
export async function ask<N extends OperationName>(name: N, input: InputOf<N>): Promise<OutputOf<N> | null> {
  try {
    return await client.call(name, input);
  } catch (error) {
    if (error instanceof CallError) {
      if (!error.cancelled) notify('error', error.message);
    } else {
      notify('error', `The page met a fault of its own: ${error instanceof Error ? error.message : error}`);
    }
    return null;
  }
}

/** Changes the test by an edit. */
export function edit(change: Edit): Promise<unknown> {
  return ask('edit', { edit: change });
}
