import { EventEmitter } from 'node:events';
import { mkdtempSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { vi } from 'vitest';

/** A stand-in for the module `electron`: it notes what it is told, and lets a test be Chromium. */

type Call = readonly unknown[];

export class FakeFrame {
  parent: FakeFrame | null = null;
  url: string;
  constructor(url: string) {
    this.url = url;
  }
}

export class FakeContents extends EventEmitter {
  readonly sent: Call[] = [];
  readonly mainFrame = new FakeFrame('app://understory/');
  openHandler: (details: { url: string }) => unknown = () => ({ action: 'allow' });
  webRtcPolicy = 'default';
  reloads = 0;
  send(...call: Call): void {
    this.sent.push(structuredClone(call));
  }
  isDestroyed(): boolean {
    return false;
  }
  reload(): void {
    this.reloads++;
  }
  setWindowOpenHandler(handler: typeof this.openHandler): void {
    this.openHandler = handler;
  }
  setWebRTCIPHandlingPolicy(policy: string): void {
    this.webRtcPolicy = policy;
  }
}

export class FakeWindow extends EventEmitter {
  static all: FakeWindow[] = [];
  readonly options: Record<string, unknown> & { readonly webPreferences: Record<string, unknown> };
  readonly webContents = new FakeContents();
  loaded = '';
  readonly did: string[] = [];
  minimized = false;
  constructor(options: FakeWindow['options']) {
    super();
    this.options = options;
    FakeWindow.all.push(this);
    app.emit('web-contents-created', {}, this.webContents);
  }
  async loadURL(url: string): Promise<void> {
    this.loaded = url;
    this.webContents.emit('did-start-navigation', { isMainFrame: true, isSameDocument: false });
    this.emit('ready-to-show');
  }
  show = (): void => void this.did.push('show');
  focus = (): void => void this.did.push('focus');
  restore = (): void => void this.did.push('restore');
  maximize = (): void => void this.did.push('maximize');
  isMinimized = (): boolean => this.minimized;
  isMaximized = (): boolean => false;
  getNormalBounds = () => ({ x: 10, y: 20, width: 900, height: 700 });
}

export class FakeSession extends EventEmitter {
  readonly options: unknown;
  permission: (contents: unknown, name: string, answer: (ok: boolean) => void) => void = () => {
    throw new Error('no handler');
  };
  permissionCheck: () => boolean = () => true;
  device: () => boolean = () => true;
  spelling = true;
  dictionaries = 'https://redirector.example/';
  beforeRequest: (
    details: { url: string },
    answer: (response: { cancel?: boolean }) => void,
  ) => void = (_details, answer) => answer({});
  readonly handled = new Map<string, (request: Request) => Promise<Response>>();
  constructor(options: unknown) {
    super();
    this.options = options;
  }
  setPermissionRequestHandler = (handler: typeof this.permission): void =>
    void (this.permission = handler);
  setPermissionCheckHandler = (handler: typeof this.permissionCheck): void =>
    void (this.permissionCheck = handler);
  setDevicePermissionHandler = (handler: typeof this.device): void => void (this.device = handler);
  setSpellCheckerEnabled = (on: boolean): void => void (this.spelling = on);
  setSpellCheckerDictionaryDownloadURL = (url: string): void => void (this.dictionaries = url);
  readonly webRequest = {
    onBeforeRequest: (handler: typeof this.beforeRequest): void =>
      void (this.beforeRequest = handler),
  };
  readonly protocol = {
    handle: (scheme: string, handler: (request: Request) => Promise<Response>): void =>
      void this.handled.set(scheme, handler),
  };
}

class FakeApp extends EventEmitter {
  isPackaged = true;
  lock = true;
  sandboxed = false;
  quits = 0;
  readonly switches = new Map<string, string>();
  readonly userData = mkdtempSync(join(tmpdir(), 'understory-'));
  ready: () => void = () => undefined;
  readonly #ready = new Promise<void>((resolve) => (this.ready = resolve));
  readonly commandLine = {
    appendSwitch: (name: string, value = ''): void => void this.switches.set(name, value),
  };
  requestSingleInstanceLock = (): boolean => this.lock;
  enableSandbox = (): void => void (this.sandboxed = true);
  whenReady = (): Promise<void> => this.#ready;
  getPath = (name: string): string => join(this.userData, name === 'userData' ? '' : name);
  getVersion = (): string => '0.1.0';
  getLocale = (): string => 'en-GB';
  quit = (): void => {
    this.quits++;
    this.emit('before-quit', { preventDefault: () => undefined });
  };
}

export const app = new FakeApp();
export const sessions = { default: new FakeSession(null), pages: new Map<string, FakeSession>() };
export const handlers = new Map<string, (event: unknown, ...words: unknown[]) => unknown>();
export const listeners = new Map<string, (event: unknown, ...words: unknown[]) => void>();
export const schemes: unknown[] = [];
export const menus: unknown[] = [];
export const errorBoxes: Call[] = [];

export const powerMonitor = new EventEmitter();

export const fakeElectron = {
  app,
  BrowserWindow: FakeWindow,
  dialog: {
    showOpenDialog: vi.fn(async () => ({ canceled: true, filePaths: [] as string[] })),
    showSaveDialog: vi.fn(async () => ({ canceled: true, filePath: '' })),
    showErrorBox: (...call: Call): void => void errorBoxes.push(call),
  },
  ipcMain: {
    handle: (channel: string, handler: (event: unknown, ...words: unknown[]) => unknown): void =>
      void handlers.set(channel, handler),
    on: (channel: string, listener: (event: unknown, ...words: unknown[]) => void): void =>
      void listeners.set(channel, listener),
  },
  Menu: {
    buildFromTemplate: (template: unknown) => template,
    setApplicationMenu: (menu: unknown): void => void menus.push(menu),
  },
  powerMonitor,
  nativeTheme: { shouldUseDarkColors: false },
  protocol: {
    registerSchemesAsPrivileged: (list: unknown[]): void => void schemes.push(...list),
  },
  screen: {
    getAllDisplays: () => [{ workArea: { x: 0, y: 0, width: 1920, height: 1080 } }],
  },
  session: {
    get defaultSession() {
      return sessions.default;
    },
    fromPartition: (name: string, options: unknown) => {
      const found = sessions.pages.get(name) ?? new FakeSession(options);
      sessions.pages.set(name, found);
      return found;
    },
  },
};
