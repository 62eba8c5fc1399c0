import { app } from 'electron';
import type { Bench } from '../shared/bench.ts';

/** Ends the program with its window, after everything has been saved. */
export function setupClosing(bench: Bench): void {
  let saved = false;
  app.on('window-all-closed', () => app.quit());
  app.on('before-quit', (event) => {
    if (saved) return;
    event.preventDefault();
    void bench.close().finally(() => {
      saved = true;
      app.quit();
    });
  });
}
