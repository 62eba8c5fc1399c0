import { BrowserWindow, screen } from 'electron';
import type { Bench } from '../shared/bench.ts';
import { EVENT_CHANNEL } from '../shared/electron-bridge.ts';
import { PAGE_ADDRESS } from './page-scheme.ts';
import { keepWindowPlace, onSomeScreen, readWindowPlace } from './window-place.ts';

/** What a window needs. */
export interface WindowParts {
  readonly bench: Bench;
  /** The built preload script. */
  readonly preload: string;
  /** Where the window's place is kept between runs. */
  readonly placeFile: string;
}

/** Opens the window with the page in it, isolated and sandboxed, at the place where it was last. */
export function openWindow({ bench, preload, placeFile }: WindowParts): BrowserWindow {
  const place = onSomeScreen(
    readWindowPlace(placeFile),
    screen.getAllDisplays().map((each) => each.workArea),
  );
  const { x, y, width, height, maximized } = place;
  const window = new BrowserWindow({
    ...{ width, height },
    ...(x === undefined || y === undefined ? {} : { x, y }),
    minWidth: 900,
    minHeight: 600,
    show: false,
    title: 'Dwellbook',
    backgroundColor: '#fcfbf8',
    webPreferences: {
      preload,
      contextIsolation: true,
      sandbox: true,
      nodeIntegration: false,
      nodeIntegrationInWorker: false,
      nodeIntegrationInSubFrames: false,
      webSecurity: true,
      allowRunningInsecureContent: false,
      experimentalFeatures: false,
      webviewTag: false,
      navigateOnDragDrop: false,
      spellcheck: false,
    },
  });
  if (maximized) window.maximize();
  window.once('ready-to-show', () => window.show());
  const unsubscribe = bench.subscribe((event) => {
    if (!window.isDestroyed()) window.webContents.send(EVENT_CHANNEL, event);
  });
  window.on('close', () => {
    void keepWindowPlace(placeFile, { ...window.getNormalBounds(), maximized: window.isMaximized() });
  });
  window.on('closed', unsubscribe);
  window.webContents.on('render-process-gone', (_event, { reason }) => {
    // the bench lives in this process: a new page finds everything as it was
    if (reason !== 'clean-exit') window.webContents.reload();
  });
  void window.loadURL(PAGE_ADDRESS);
  return window;
}
