import { type IpcMainInvokeEvent, ipcMain } from 'electron';
import type { Bench } from '../shared/bench.ts';
import { callOperation } from '../shared/call-operation.ts';
import { CALL_CHANNEL } from '../shared/electron-bridge.ts';
import { isPageAddress } from './page-scheme.ts';

/** Whether a call comes from the page itself: the top frame of a window, at the page's own address. */
export function isFromPage({ sender, senderFrame }: IpcMainInvokeEvent): boolean {
  return senderFrame !== null && senderFrame === sender.mainFrame && isPageAddress(senderFrame.url);
}

/** The one gate for calls from the page: sender checked, name in the table, input of its schema. */
export function setupOperations(bench: Bench, onFault: (error: unknown) => void): void {
  ipcMain.handle(CALL_CHANNEL, (event, name: unknown, input: unknown) => {
    if (!isFromPage(event)) throw new Error('This call does not come from the page.');
    return callOperation(bench.handlers, name, input, onFault);
  });
}
