import type { ElectronBridge } from '../../shared/electron-bridge.ts';
import type { BenchClient } from './bench-client.ts';
import { ElectronClient } from './electron-client.ts';
import { LoopbackClient } from './loopback-client.ts';

declare global {
  interface Window {
    readonly dwellbook?: ElectronBridge;
  }
}

/** The client for the host this page came from. */
export function connect(): BenchClient {
  return window.dwellbook ? new ElectronClient(window.dwellbook) : new LoopbackClient();
}
