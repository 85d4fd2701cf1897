import { existsSync, readFileSync } from 'node:fs';
import { rm } from 'node:fs/promises';
import { join } from 'node:path';
import type { MenuItemConstructorOptions } from 'electron';
import { afterAll, beforeAll, beforeEach, describe, expect, it, vi } from 'vitest';
import { methods } from '../../../main/api.ts';
import { startElectron, studyAmong } from '../../../main/shells/electron-app.ts';
import type { Surroundings } from '../../../main/window/session-types.ts';
import { fakeSession, overview, type FakeSession } from '../link/fake-session.ts';
import {
  app,
  errorBoxes,
  FakeContents,
  fakeElectron,
  FakeFrame,
  FakeWindow,
  handlers,
  listeners,
  menus,
  schemes,
  sessions,
  type FakeSession as FakePages,
} from './electron-fake.ts';

// The real module fetches its program when it is imported.
vi.mock('electron', async () => (await import('./electron-fake.ts')).fakeElectron);

let session: FakeSession;
let surroundings: Surroundings;
let made = 0;
const onlyWindow = (): FakeWindow => FakeWindow.all.at(-1) as FakeWindow;
const pages = (): FakePages => sessions.pages.get('understory') as FakePages;

beforeAll(async () => {
  session = fakeSession({
    overview: async () => ({ value: overview }),
    openStudy: async (takes) => {
      const { path } = takes as { path: string };
      return path.includes('damaged')
        ? { refused: 'The study is damaged.', code: 'damaged' }
        : { value: overview };
    },
    fit: (_takes, { signal, onProgress }) =>
      new Promise((resolve) => {
        onProgress({ sweep: 1, bound: null, change: 1, fraction: 0.5 });
        signal.addEventListener('abort', () => resolve({ refused: 'x', code: 'stopped' }));
      }),
  });
  startElectron((given) => {
    made++;
    surroundings = given;
    return session;
  });
  expect(made).toBe(0);
  app.emit('open-file', { preventDefault: () => undefined }, '/early.understory');
  app.ready();
  await vi.waitFor(() => expect(FakeWindow.all).toHaveLength(1));
  await vi.waitFor(() => expect(onlyWindow().loaded).not.toBe(''));
});
afterAll(() => rm(app.userData, { recursive: true }));
beforeEach(() => {
  session.calls.length = 0;
  onlyWindow().webContents.sent.length = 0;
  errorBoxes.length = 0;
});

/** The event of a message as the main process gets it. */
function from(frame: FakeFrame | null, sender: FakeContents = onlyWindow().webContents) {
  return { sender, senderFrame: frame };
}
const ours = () => from(onlyWindow().webContents.mainFrame);
let lastId = 0;
const call = (method: string, takes: unknown, event: unknown = ours(), id = ++lastId) =>
  (handlers.get(`understory/call/${method}`) as (...words: unknown[]) => Promise<unknown>)(
    event,
    id,
    takes,
  );

describe('before Electron is ready', () => {
  it('the sandbox is on for every process, and our scheme is known', () => {
    expect(app.sandboxed).toBe(true);
    expect(schemes).toEqual([
      {
        scheme: 'app',
        privileges: { standard: true, secure: true, supportFetchAPI: true, corsEnabled: true },
      },
    ]);
  });

  it('Chromium is told to resolve no name and to send nothing of its own', () => {
    expect(app.switches.get('host-resolver-rules')).toBe('MAP * ~NOTFOUND');
    for (const name of [
      'disable-background-networking',
      'disable-component-update',
      'disable-domain-reliability',
      'disable-breakpad',
      'no-pings',
    ]) {
      expect(app.switches.has(name), name).toBe(true);
    }
    expect([...app.switches.keys()].join()).not.toMatch(/no-sandbox|disable-web-security/u);
  });

  it('a file that the system hands over waits for the session', () => {
    expect(made).toBe(1);
    expect(existsSync(join(app.userData, 'recent.json'))).toBe(false);
  });
});

describe('the window', () => {
  it('is isolated, sandboxed and without Node', () => {
    const { webPreferences, title } = onlyWindow().options;
    expect(webPreferences).toMatchObject({
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
      spellcheck: false,
      devTools: false,
      partition: 'understory',
    });
    expect(String(webPreferences['preload'])).toMatch(/out[\\/]preload[\\/]preload\.cjs$/u);
    expect(title).toBe('Understory');
    expect(onlyWindow().loaded).toBe('app://understory/');
  });

  it('writes nothing of a page to the drive: its session is in memory, without a cache', () => {
    expect([...sessions.pages.keys()]).toEqual(['understory']);
    expect(pages().options).toEqual({ cache: false });
  });

  it('remembers where it stood', () => {
    onlyWindow().emit('close');
    const kept: unknown = JSON.parse(readFileSync(join(app.userData, 'window.json'), 'utf8'));
    expect(kept).toEqual({
      bounds: { x: 10, y: 20, width: 900, height: 700 },
      maximized: false,
    });
  });

  it.each([
    'will-navigate',
    'will-frame-navigate',
    'will-redirect',
    'will-attach-webview',
    'page-title-updated',
  ])('is denied: %s', (name) => {
    const preventDefault = vi.fn();
    onlyWindow().webContents.emit(name, { preventDefault }, 'https://example.org/');
    expect(preventDefault).toHaveBeenCalledOnce();
  });

  it('opens no other window, and tells no address by WebRTC', () => {
    const { webContents } = onlyWindow();
    expect(webContents.openHandler({ url: 'app://understory/' })).toEqual({ action: 'deny' });
    expect(webContents.webRtcPolicy).toBe('disable_non_proxied_udp');
  });

  it('has the same denied to whatever else may come to show pages', () => {
    const other = new FakeContents();
    app.emit('web-contents-created', {}, other);
    const preventDefault = vi.fn();
    other.emit('will-navigate', { preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
  });
});

describe.each([
  ['of the window', () => pages()],
  ['that nothing should use', () => sessions.default],
])('the session %s', (_name, get) => {
  it('grants no permission', () => {
    for (const name of [
      'media',
      'geolocation',
      'notifications',
      'clipboard-read',
      'openExternal',
    ]) {
      const answer = vi.fn();
      get().permission(null, name, answer);
      expect(answer, name).toHaveBeenCalledExactlyOnceWith(false);
    }
    expect(get().permissionCheck()).toBe(false);
    expect(get().device()).toBe(false);
  });

  it('checks no spelling, and would fetch dictionaries from nowhere', () => {
    expect(get().spelling).toBe(false);
    expect(get().dictionaries).toMatch(/^app:\/\/understory\/.*\/$/u);
  });

  it('cancels every request but those for our own files', () => {
    const cancelled = (url: string): boolean | undefined => {
      let result: boolean | undefined;
      get().beforeRequest({ url }, ({ cancel }) => (result = cancel));
      return result;
    };
    for (const url of [
      'https://example.org/',
      'http://127.0.0.1:8080/',
      'ws://example.org/',
      'wss://example.org/',
      'file:///etc/passwd',
      'ftp://example.org/',
      'data:text/html,x',
      'blob:null/x',
      'chrome://gpu',
      'devtools://devtools/x',
      'app://other/',
      'app://understory.example.org/',
      'app://understory@example.org/',
      'application://understory/',
      'nonsense',
    ]) {
      expect(cancelled(url), url).toBe(true);
    }
    expect(cancelled('app://understory/assets/x.js')).toBe(false);
  });

  it('lets no page save files by itself', () => {
    const preventDefault = vi.fn();
    get().emit('will-download', { preventDefault });
    expect(preventDefault).toHaveBeenCalledOnce();
  });
});

describe('the scheme app://', () => {
  const get = (url: string, method = 'GET') =>
    // Not a Request: Node takes no address of this scheme.
    (pages().handled.get('app') as (request: unknown) => Promise<Response>)({ url, method });

  it('serves the window’s files with the headers that shut it off', async () => {
    const response = await get('app://understory/');
    expect(response.status).toBe(200);
    expect(response.headers.get('content-type')).toBe('text/html; charset=utf-8');
    const policy = response.headers.get('content-security-policy') ?? '';
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("connect-src 'self';");
    expect(policy).not.toContain('ws:');
    expect(response.headers.get('cross-origin-opener-policy')).toBe('same-origin');
    expect(response.headers.get('cross-origin-embedder-policy')).toBe('require-corp');
    expect(response.headers.get('x-content-type-options')).toBe('nosniff');
    expect(response.headers.get('cache-control')).toBe('no-store');
  });

  it('serves nothing else', async () => {
    expect((await get('app://other/')).status).toBe(403);
    expect((await get('app://understory/', 'POST')).status).toBe(403);
    expect((await get('app://understory/%2e%2e/package.json')).status).toBe(404);
    expect((await get('app://understory/..%2f..%2fpackage.json')).status).toBe(404);
    expect((await get('app://understory/%zz')).status).toBe(400);
  });
});

describe('calls', () => {
  it('have one channel for each method, and no other', () => {
    expect([...handlers.keys()].sort()).toEqual(
      methods.map((method) => `understory/call/${method}`).sort(),
    );
    expect([...listeners.keys()]).toEqual(['understory/cancel']);
  });

  it('of our own top frame are answered', async () => {
    expect(await call('overview', null)).toEqual({ value: overview });
  });

  it('of anything else are refused, and reach no handler', async () => {
    const inner = new FakeFrame('app://understory/');
    inner.parent = onlyWindow().webContents.mainFrame;
    const foreign = [
      from(inner),
      from(null),
      from(new FakeFrame('https://example.org/')),
      from(new FakeFrame('app://other/')),
      from(new FakeFrame('about:blank')),
      from(new FakeFrame('file:///x')),
      from(new FakeFrame('')),
      from(onlyWindow().webContents.mainFrame, new FakeContents()),
    ];
    for (const event of foreign) {
      expect(await call('overview', null, event)).toMatchObject({ code: 'not authorised' });
    }
    expect(session.calls).toEqual([]);
  });

  it('with a malformed payload are refused', async () => {
    expect(await call('nameTheme', { theme: 1 })).toMatchObject({ code: 'malformed request' });
  });

  it('report progress to the window and are cancelled by it alone', async () => {
    const { webContents } = onlyWindow();
    const answer = call('fit', { kind: 're-fit', themes: null }, ours(), 4000);
    await vi.waitFor(() =>
      expect(webContents.sent).toContainEqual([
        'understory/progress',
        4000,
        expect.objectContaining({ fraction: 0.5 }),
      ]),
    );
    const cancel = listeners.get('understory/cancel') as (...words: unknown[]) => void;
    let ended = false;
    void answer.then(() => (ended = true));
    cancel(from(new FakeFrame('https://example.org/')), 4000);
    await new Promise((resolve) => setTimeout(resolve, 5));
    expect(ended).toBe(false);
    cancel(ours(), 4000);
    expect(await answer).toMatchObject({ code: 'stopped' });
  });

  it('of a page that is loaded anew are stopped', async () => {
    const answer = call('fit', { kind: 're-fit', themes: null });
    const navigated = { isMainFrame: true, isSameDocument: false };
    onlyWindow().webContents.emit('did-start-navigation', navigated);
    expect(await answer).toMatchObject({ code: 'stopped' });
    expect(await call('overview', null)).toEqual({ value: overview });
  });

  it('go on after the page crashed: it is drawn again', async () => {
    onlyWindow().webContents.emit('render-process-gone', {}, { reason: 'crashed' });
    expect(onlyWindow().webContents.reloads).toBe(1);
    onlyWindow().webContents.emit('render-process-gone', {}, { reason: 'clean-exit' });
    expect(onlyWindow().webContents.reloads).toBe(1);
  });
});

describe('events', () => {
  it('of the session reach the window', () => {
    session.tell('changed', overview);
    session.tell('closed', null);
    expect(onlyWindow().webContents.sent).toEqual([
      ['understory/event', 'changed', overview],
      ['understory/event', 'closed', null],
    ]);
  });

  it('of the menu bring the window forward and are carried out there', async () => {
    const template = menus[0] as MenuItemConstructorOptions[];
    const items = template.flatMap(({ submenu }) => submenu as MenuItemConstructorOptions[]);
    const undo = items.find((item) => item?.label === 'Undo');
    (undo?.click as () => void)();
    await vi.waitFor(() =>
      expect(onlyWindow().webContents.sent).toEqual([['understory/event', 'command', 'undo']]),
    );
    expect(onlyWindow().did).toContain('focus');
    expect(items.some((item) => item?.role === 'toggleDevTools')).toBe(false);
  });
});

describe('a study handed over by the system', () => {
  const opened = () => session.calls.map(({ takes }) => (takes as { path: string }).path);

  it('is found among the arguments', () => {
    expect(studyAmong(['--flag', 'a.understory'], '/home/ada')).toBe('/home/ada/a.understory');
    expect(studyAmong(['/s/B.UNDERSTORY', '--x=y.understory'], '/')).toBe('/s/B.UNDERSTORY');
    expect(studyAmong(['.', 'notes.txt'], '/')).toBeNull();
  });

  it('opens in the window that is there when the app is started again', async () => {
    onlyWindow().minimized = true;
    app.emit('second-instance', {}, ['understory', 'b.understory'], '/studies');
    await vi.waitFor(() => expect(opened()).toEqual(['/studies/b.understory']));
    expect(FakeWindow.all).toHaveLength(1);
    expect(onlyWindow().did).toContain('restore');
    expect(onlyWindow().did.at(-1)).toBe('focus');
  });

  it('opens when it is double-clicked on macOS', async () => {
    const preventDefault = vi.fn();
    app.emit('open-file', { preventDefault }, '/s/c.understory');
    await vi.waitFor(() => expect(opened()).toEqual(['/s/c.understory']));
    expect(preventDefault).toHaveBeenCalledOnce();
  });

  it('that cannot be opened is said so', async () => {
    app.emit('open-file', { preventDefault: () => undefined }, '/s/damaged.understory');
    await vi.waitFor(() => expect(errorBoxes).toEqual([['Understory', 'The study is damaged.']]));
  });
});

describe('what the session is given', () => {
  it('says which shell it is, and where studies are kept', () => {
    expect(surroundings.about).toMatchObject({
      shell: 'electron',
      dialogs: true,
      version: '0.1.0',
      locale: 'en-GB',
      studiesFolder: join(app.userData, 'documents', 'Understory'),
    });
    expect(existsSync(join(surroundings.demoFolder, 'attributes.csv'))).toBe(true);
  });

  it('has the system’s dialogs, over the window; null where they are cancelled', async () => {
    const { dialogs } = surroundings;
    expect(await dialogs?.chooseStudy()).toBeNull();
    expect(await dialogs?.chooseTranscripts()).toBeNull();
    expect(await dialogs?.placeStudy('x')).toBeNull();
    const { showOpenDialog, showSaveDialog } = fakeElectron.dialog;
    showOpenDialog.mockResolvedValueOnce({ canceled: false, filePaths: ['/a.txt', '/b.txt'] });
    expect(await dialogs?.chooseTranscripts()).toEqual(['/a.txt', '/b.txt']);
    showSaveDialog.mockResolvedValueOnce({ canceled: false, filePath: '/x.csv' });
    expect(await dialogs?.placeFile('../../x: "y".csv')).toBe('/x.csv');
    const [over, options] = showSaveDialog.mock.lastCall as unknown as [unknown, object];
    expect(over).toBe(onlyWindow());
    expect(options).toMatchObject({ defaultPath: 'x y .csv' });
  });
});

describe('quitting', () => {
  it('closes the study first, once, and stops what runs', async () => {
    const running = call('fit', { kind: 're-fit', themes: null });
    const preventDefault = vi.fn();
    const before = app.quits;
    app.emit('before-quit', { preventDefault });
    app.emit('before-quit', { preventDefault });
    expect(preventDefault).toHaveBeenCalledTimes(2);
    expect(await running).toMatchObject({ code: 'stopped' });
    await vi.waitFor(() => expect(app.quits).toBe(before + 1));
    expect(session.closes).toBe(1);
    const late = vi.fn();
    app.emit('before-quit', { preventDefault: late });
    expect(late).not.toHaveBeenCalled();
    expect(await call('overview', null)).toMatchObject({ code: 'not authorised' });
  });

  it('happens at once where another one runs already', () => {
    app.lock = false;
    const before = app.quits;
    startElectron(() => {
      throw new Error('a second session was made');
    });
    expect(app.quits).toBe(before + 1);
  });
});
