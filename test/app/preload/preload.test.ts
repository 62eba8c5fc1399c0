import { expect, it, vi } from 'vitest';

vi.mock('electron', () => import('../electron-double.ts'));

import '../../../app/preload/preload.ts';
import { CALL_CHANNEL, EVENT_CHANNEL } from '../../../app/shared/electron-bridge.ts';
import { exposed, rendererCalls } from '../electron-double.ts';

const bridge = exposed.get('dwellbook') as unknown as {
  call(name: string, input: unknown): Promise<unknown>;
  subscribe(listener: (event: unknown) => void): void;
  pathOf(file: unknown): string;
};

it('the page is given three functions under one name and nothing else', () => {
  expect([...exposed.keys()]).toEqual(['dwellbook']);
  expect(Object.keys(bridge).sort()).toEqual(['call', 'pathOf', 'subscribe']);
});

it('a call goes out on the one channel, whatever it is named', async () => {
  await bridge.call('ipc-channel-of-somebody-else', { a: 1 });
  expect(rendererCalls.invoked).toEqual([[CALL_CHANNEL, 'ipc-channel-of-somebody-else', { a: 1 }]]);
});

it('a listener is handed the pushed data and never the event object', () => {
  const seen: unknown[][] = [];
  bridge.subscribe((...args: unknown[]) => void seen.push(args));
  const listener = rendererCalls.listeners.get(EVENT_CHANNEL) as unknown as (...args: unknown[]) => void;
  listener({ sender: 'must not leak' }, { type: 'command', command: 'undo' });
  expect(seen).toEqual([[{ type: 'command', command: 'undo' }]]);
  expect([...rendererCalls.listeners.keys()]).toEqual([EVENT_CHANNEL]);
});

it('a dropped file gives its path', () => {
  expect(bridge.pathOf({ path: '/clips/1.6Hz.mp4' })).toBe('/clips/1.6Hz.mp4');
});
