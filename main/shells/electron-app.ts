import { join, resolve } from 'node:path';
import {
  app,
  BrowserWindow,
  dialog,
  ipcMain,
  Menu,
  nativeTheme,
  powerMonitor,
  protocol,
  screen,
  session as sessions,
} from 'electron';
import { methods, type Events } from '../api.ts';
import { backupStore } from '../backup-settings.ts';
import { faultLog, Line } from '../link/index.ts';
import { lockSettings } from '../lock-settings.ts';
import type { Session, Surroundings } from '../window/session-types.ts';
import { accountName } from './account-name.ts';
import {
  appOrigin,
  appScheme,
  cancelChannel,
  channelOf,
  eventChannel,
  eventNames,
  progressChannel,
} from './channels.ts';
import { systemDialogs } from './electron-dialogs.ts';
import {
  guardContents,
  guardSession,
  isOurFrame,
  quietChromium,
  serveApp,
} from './electron-guards.ts';
import { menuTemplate } from './menu.ts';
import { placesOfApp, studiesFolder } from './places.ts';
import { machineSettings } from './machine-settings.ts';
import { recentPaths } from './recent-paths.ts';
import { StaticFiles } from './static-files.ts';
import { placement, readWindowState, smallest, writeWindowState } from './window-state.ts';

/** The study among a program's arguments: a file's path, or null. */
export function studyAmong(words: readonly string[], folder: string): string | null {
  const path = words.findLast((word) => !word.startsWith('-') && /\.understory$/iu.test(word));
  return path === undefined ? null : resolve(folder, path);
}

/**
 * The Electron shell. Runs synchronously up to the point where Electron must be ready, because its
 * schemes and switches cannot be set later.
 */
export function startElectron(createSession: (surroundings: Surroundings) => Session): void {
  if (!app.requestSingleInstanceLock()) {
    // The first one gets our arguments, and shows itself.
    app.quit();
    return;
  }
  app.enableSandbox();
  quietChromium(app);
  protocol.registerSchemesAsPrivileged([
    {
      scheme: appScheme,
      privileges: { standard: true, secure: true, supportFetchAPI: true, corsEnabled: true },
    },
  ]);
  app.on('web-contents-created', (_event, contents) => guardContents(contents));

  const shell = new ElectronShell(createSession);
  app.on('second-instance', (_event, words, folder) => {
    void shell.show();
    shell.open(studyAmong(words.slice(1), folder));
  });
  // A double-clicked file on macOS; may come before Electron is ready.
  app.on('open-file', (event, path) => {
    event.preventDefault();
    shell.open(path);
  });
  app.on('window-all-closed', () => {
    if (process.platform !== 'darwin') app.quit();
  });
  app.on('activate', () => void shell.show());
  app.on('before-quit', (event) => shell.beforeQuit(event));
  shell.open(studyAmong(process.argv.slice(1), process.cwd()));
  void app.whenReady().then(() => shell.start());
}

class ElectronShell {
  readonly #createSession: (surroundings: Surroundings) => Session;
  readonly #places = placesOfApp();
  #session: Session | null = null;
  #window: BrowserWindow | null = null;
  #line: Line | null = null;
  #waiting: string | null = null;
  #closed: 'no' | 'closing' | 'yes' = 'no';

  constructor(createSession: (surroundings: Surroundings) => Session) {
    this.#createSession = createSession;
  }

  async start(): Promise<void> {
    const development = !app.isPackaged;
    guardSession(sessions.defaultSession, { development });
    // Without "persist:", and without a cache: nothing that a page held is written to the drive.
    const pages = sessions.fromPartition('understory', { cache: false });
    guardSession(pages, { development });
    serveApp(pages, new StaticFiles(this.#places.window));
    this.#session = this.#createSession(this.#surroundings());
    this.#answerWindows();
    // Whoever locks the screen, or shuts the lid, has left the table.
    for (const event of ['lock-screen', 'suspend'] as const) {
      powerMonitor.on(event as 'suspend', () => void this.#session?.lock());
    }
    Menu.setApplicationMenu(
      Menu.buildFromTemplate(
        menuTemplate({
          platform: process.platform,
          development,
          command: (command) => void this.#command(command),
        }),
      ),
    );
    await this.#openWaiting();
    await this.show();
  }

  /** Opens a study as soon as there is a session; null opens none. */
  open(path: string | null): void {
    if (path === null) return;
    this.#waiting = path;
    if (this.#session !== null) void this.#openWaiting();
  }

  /** Brings the window forward, making it where there is none. */
  async show(): Promise<void> {
    if (this.#session === null) return;
    if (this.#window === null) {
      await this.#makeWindow();
      return;
    }
    if (this.#window.isMinimized()) this.#window.restore();
    this.#window.show();
    this.#window.focus();
  }

  /** Nothing ends before the study is closed. */
  beforeQuit(event: { readonly preventDefault: () => void }): void {
    if (this.#closed === 'yes' || this.#session === null) return;
    event.preventDefault();
    if (this.#closed === 'closing') return;
    this.#closed = 'closing';
    this.#line?.hangUp();
    void this.#session
      .close()
      .catch((error: unknown) => this.#fault('close', error))
      .finally(() => {
        this.#closed = 'yes';
        app.quit();
      });
  }

  #settings(name: string): string {
    return join(app.getPath('userData'), name);
  }

  #fault(where: string, error: unknown): void {
    void faultLog(this.#settings('faults.log'), () => new Date().toISOString())(where, error);
  }

  #surroundings(): Surroundings {
    const folder = studiesFolder(app.getPath('documents'));
    return {
      about: {
        version: app.getVersion(),
        shell: 'electron',
        dialogs: true,
        studiesFolder: folder,
        platform: process.platform,
        locale: app.getLocale() || 'en',
      },
      dialogs: systemDialogs({ dialog, window: () => this.#window, studiesFolder: folder }),
      recent: recentPaths(this.#settings('recent.json')),
      backups: backupStore(this.#settings('backups.json')),
      machine: machineSettings(this.#settings('machine.json')),
      lock: lockSettings(this.#settings('lock.json')),
      demoFolder: this.#places.demo,
      now: () => new Date().toISOString(),
      readerName: accountName(),
      comeForward: () => void this.show(),
    };
  }

  async #openWaiting(): Promise<void> {
    const path = this.#waiting;
    this.#waiting = null;
    if (path === null || this.#session === null) return;
    try {
      const answer = await this.#session.handlers.openStudy(
        { path, readOnly: false },
        { onProgress: () => undefined, signal: new AbortController().signal },
      );
      // The window may not be there yet to say it; it asks for a password by itself.
      if ('refused' in answer && answer.code !== 'locked')
        dialog.showErrorBox('Understory', answer.refused);
    } catch (error) {
      this.#fault('openStudy', error);
    }
  }

  #answerWindows(): void {
    const session = this.#session;
    if (session === null) return;
    const ours = (event: Parameters<typeof isOurFrame>[0]): boolean =>
      isOurFrame(event, this.#window?.webContents ?? null);
    for (const method of methods) {
      ipcMain.handle(channelOf(method), (event, id: unknown, takes: unknown) => {
        const line = this.#line ?? this.#newLine(session);
        return line.call({ id, method, takes, authorised: ours(event) });
      });
    }
    ipcMain.on(cancelChannel, (event, id: unknown) => {
      if (ours(event)) this.#line?.cancel(id);
    });
    for (const name of eventNames) {
      session.on(name, (detail: Events[typeof name]) => this.#tell(eventChannel, name, detail));
    }
  }

  #newLine(session: Session): Line {
    this.#line?.hangUp();
    this.#line = new Line({
      handlers: session.handlers,
      onProgress: (id, progress) => this.#tell(progressChannel, id, progress),
      onFault: (method, error) => this.#fault(method, error),
    });
    return this.#line;
  }

  #tell(channel: string, ...details: unknown[]): void {
    const contents = this.#window?.webContents;
    if (contents !== undefined && !contents.isDestroyed()) contents.send(channel, ...details);
  }

  async #command(command: Events['command']): Promise<void> {
    await this.show();
    this.#tell(eventChannel, 'command', command);
  }

  async #makeWindow(): Promise<void> {
    const session = this.#session;
    if (session === null) return;
    const file = this.#settings('window.json');
    const { bounds, maximized } = placement(
      readWindowState(file),
      screen.getAllDisplays().map(({ workArea }) => workArea),
    );
    const window = new BrowserWindow({
      ...bounds,
      minWidth: smallest.width,
      minHeight: smallest.height,
      show: false,
      title: 'Understory',
      // The paper of the window's own look, so that nothing flashes.
      backgroundColor: nativeTheme.shouldUseDarkColors ? '#1b1e19' : '#f7f4ec',
      ...(process.platform === 'linux' ? { icon: this.#places.icon } : {}),
      webPreferences: {
        partition: 'understory',
        preload: this.#places.preload,
        contextIsolation: true,
        sandbox: true,
        nodeIntegration: false,
        nodeIntegrationInWorker: false,
        nodeIntegrationInSubFrames: false,
        webviewTag: false,
        webSecurity: true,
        allowRunningInsecureContent: false,
        experimentalFeatures: false,
        navigateOnDragDrop: false,
        safeDialogs: true,
        spellcheck: false,
        // Results that arrive while the window is behind another one are drawn all the same.
        backgroundThrottling: false,
        devTools: !app.isPackaged,
      },
    });
    this.#window = window;
    if (maximized) window.maximize();
    window.once('ready-to-show', () => {
      window.show();
      // The starter (start.mjs) learns that Electron runs here.
      process.send?.('ready');
    });
    window.on('close', () => {
      writeWindowState(file, {
        bounds: window.getNormalBounds(),
        maximized: window.isMaximized(),
      });
    });
    window.on('closed', () => {
      this.#window = null;
      this.#line?.hangUp();
      this.#line = null;
    });
    const { webContents } = window;
    // A page that is loaded anew begins a new line: what the old one asked for is stopped.
    webContents.on('did-start-navigation', ({ isMainFrame, isSameDocument }) => {
      if (isMainFrame && !isSameDocument) this.#newLine(session);
    });
    webContents.on('render-process-gone', (_event, { reason }) => {
      if (reason === 'clean-exit') return;
      this.#fault(`window ${reason}`, null);
      // The study is in this process and on the drive: the window only has to be drawn again.
      webContents.reload();
    });
    await window.loadURL(`${appOrigin}/`);
  }
}
