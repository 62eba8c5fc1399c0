import { app } from 'electron';
import { isPageAddress } from './page-scheme.ts';

/** Keeps every window on the page: no other address, no new windows, no embedded views. */
export function setupNavigation(): void {
  app.on('web-contents-created', (_created, contents) => {
    const refuse = (event: { preventDefault(): void; url: string }): void => {
      if (!isPageAddress(event.url)) event.preventDefault();
    };
    contents.on('will-navigate', refuse);
    contents.on('will-redirect', refuse);
    contents.on('will-frame-navigate', refuse);
    contents.on('will-attach-webview', (event) => event.preventDefault());
    contents.setWindowOpenHandler(() => ({ action: 'deny' }));
  });
}
