import { contextBridge, ipcRenderer, webUtils } from 'electron';
import type { CallOutcome } from '../shared/answers.ts';
import type { BenchEvent } from '../shared/bench-state.ts';
import { CALL_CHANNEL, type ElectronBridge, EVENT_CHANNEL } from '../shared/electron-bridge.ts';

// The one bridge into the page: two fixed channels and the path of a dropped file, no Electron objects.
contextBridge.exposeInMainWorld('dwellbook', {
  call: (name, input): Promise<CallOutcome> => ipcRenderer.invoke(CALL_CHANNEL, name, input),
  subscribe: (listener): void => {
    ipcRenderer.on(EVENT_CHANNEL, (_event, pushed: BenchEvent) => listener(pushed));
  },
  pathOf: (file): string => webUtils.getPathForFile(file as Parameters<typeof webUtils.getPathForFile>[0]),
} satisfies ElectronBridge);
