import { EventEmitter } from 'node:events';

/**
 * A double of the `electron` module for tests: it has what the program uses and nothing else, keeps what was asked of
 * it, and throws on whatever it was not made for.
 */
function strict<T extends object>(name: string, value: T): T {
  return new Proxy(value, {
    get(target, key, receiver) {
      if (key in target || typeof key === 'symbol' || key === 'then')
        return Reflect.get(target, key, key in EventEmitter.prototype ? receiver : target) as unknown;
      throw new Error(`the double of electron has no ${name}.${key}`);
    },
  });
}

/** An event whose default can be prevented, as Electron hands them out. */
export function preventable<T extends object>(
  more: T = {} as T,
): T & { defaultPrevented: boolean; preventDefault(): void } {
  return {
    ...more,
    defaultPrevented: false,
    preventDefault(): void {
      this.defaultPrevented = true;
    },
  };
}

class App extends EventEmitter {
  isPackaged = false;
  quits = 0;
  exitCode: number | null = null;
  hasLock = true;
  readonly paths: Record<string, string> = {};
  whenReady = async (): Promise<void> => undefined;
  requestSingleInstanceLock = (): boolean => this.hasLock;
  quit = (): void => {
    this.quits++;
  };
  exit = (code: number): void => {
    this.exitCode = code;
  };
  getVersion = (): string => '0.0.0';
  getPath = (name: string): string => {
    const path = this.paths[name];
    if (path === undefined) throw new Error(`the double of electron knows no path "${name}"`);
    return path;
  };
}

type Listener = (...args: never[]) => unknown;

/** What a window shows, as far as main touches it. */
export class WebContents extends EventEmitter {
  readonly sent: unknown[][] = [];
  readonly mainFrame = { url: 'dwellbook://bench/index.html' };
  openHandler: ((details: { url: string }) => { action: string }) | null = null;
  reloads = 0;
  setWindowOpenHandler = (handler: (details: { url: string }) => { action: string }): void => {
    this.openHandler = handler;
  };
  send = (...args: unknown[]): void => void this.sent.push(args);
  reload = (): void => void this.reloads++;
}

/** A window that keeps its options. */
export class BrowserWindow extends EventEmitter {
  static readonly all: BrowserWindow[] = [];
  readonly webContents = strict('webContents', new WebContents());
  readonly loaded: string[] = [];
  shown = false;
  maximized = false;
  destroyed = false;
  constructor(readonly options: Record<string, unknown>) {
    super();
    BrowserWindow.all.push(this);
    app.emit('web-contents-created', {}, this.webContents);
  }
  loadURL = async (url: string): Promise<void> => void this.loaded.push(url);
  show = (): void => {
    this.shown = true;
  };
  maximize = (): void => {
    this.maximized = true;
  };
  isMaximized = (): boolean => this.maximized;
  isMinimized = (): boolean => false;
  isDestroyed = (): boolean => this.destroyed;
  focus = (): void => undefined;
  getNormalBounds = (): object => ({ x: 40, y: 30, width: 1200, height: 800 });
}

export const app = strict('app', new App());

/** Handlers given to ipcMain, by channel. */
export const ipcHandlers = new Map<string, (event: unknown, ...args: unknown[]) => unknown>();
export const ipcMain = strict('ipcMain', {
  handle: (channel: string, handler: (event: unknown, ...args: unknown[]) => unknown): void => {
    if (ipcHandlers.has(channel)) throw new Error(`a second handler for ${channel}`);
    ipcHandlers.set(channel, handler);
  },
});

/** The scheme handlers and privileges asked for. */
export const schemes = {
  privileged: [] as { scheme: string; privileges: Record<string, boolean> }[],
  handlers: new Map<string, (request: Request) => Promise<Response>>(),
};
export const protocol = strict('protocol', {
  registerSchemesAsPrivileged: (list: typeof schemes.privileged): void => {
    schemes.privileged.push(...list);
  },
  handle: (scheme: string, handler: (request: Request) => Promise<Response>): void => {
    schemes.handlers.set(scheme, handler);
  },
});

class Session extends EventEmitter {
  requestHandler: ((contents: unknown, permission: string, answer: (ok: boolean) => void) => void) | null =
    null;
  checkHandler: (() => boolean) | null = null;
  deviceHandler: (() => boolean) | null = null;
  setPermissionRequestHandler = (handler: Session['requestHandler']): void => {
    this.requestHandler = handler;
  };
  setPermissionCheckHandler = (handler: Session['checkHandler']): void => {
    this.checkHandler = handler;
  };
  setDevicePermissionHandler = (handler: Session['deviceHandler']): void => {
    this.deviceHandler = handler;
  };
}
export const session = strict('session', { defaultSession: strict('defaultSession', new Session()) });

/** Answers that the next dialogs give. */
export const dialogAnswers: { open: object; save: object; asked: Record<string, unknown>[] } = {
  open: { canceled: true, filePaths: [] },
  save: { canceled: true, filePath: '' },
  asked: [],
};
export const dialog = strict('dialog', {
  showOpenDialog: async (options: Record<string, unknown>): Promise<object> => {
    dialogAnswers.asked.push(options);
    return dialogAnswers.open;
  },
  showSaveDialog: async (options: Record<string, unknown>): Promise<object> => {
    dialogAnswers.asked.push(options);
    return dialogAnswers.save;
  },
});

export const screen = strict('screen', {
  getAllDisplays: (): object[] => [{ workArea: { x: 0, y: 0, width: 1920, height: 1080 } }],
});

/** The menu set last. */
export const menus: { set: unknown } = { set: null };
export const Menu = strict('Menu', {
  buildFromTemplate: (template: unknown): unknown => template,
  setApplicationMenu: (menu: unknown): void => {
    menus.set = menu;
  },
});

/** What preload put into the page, by name. */
export const exposed = new Map<string, Record<string, Listener>>();
export const contextBridge = strict('contextBridge', {
  exposeInMainWorld: (name: string, api: Record<string, Listener>): void => {
    exposed.set(name, api);
  },
});

/** What the page's side of IPC was asked. */
export const rendererCalls = { invoked: [] as unknown[][], listeners: new Map<string, Listener>() };
export const ipcRenderer = strict('ipcRenderer', {
  invoke: async (...args: unknown[]): Promise<unknown> => {
    rendererCalls.invoked.push(args);
    return { ok: true, output: 'answer' };
  },
  on: (channel: string, listener: Listener): void => {
    rendererCalls.listeners.set(channel, listener);
  },
});

export const webUtils = strict('webUtils', {
  getPathForFile: (file: { path?: string }): string => file.path ?? '',
});
