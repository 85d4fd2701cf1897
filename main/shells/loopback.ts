import { join } from 'node:path';
import { createInterface } from 'node:readline';
import { version } from '../../package.json';
import { backupStore } from '../backup-settings.ts';
import type { Answer, Refused } from '../api.ts';
import { faultLog } from '../link/index.ts';
import { lockSettings } from '../lock-settings.ts';
import { createSession } from '../window/session.ts';
import type { Session, Surroundings } from '../window/session-types.ts';
import { accountName } from './account-name.ts';
import { openerFailed } from './browser.ts';
import { startLoopback, type Loopback } from './loopback-server.ts';
import { machineSettings } from './machine-settings.ts';
import { placesOfApp, settingsFolder, studiesFolder } from './places.ts';
import { recentPaths } from './recent-paths.ts';
import { StaticFiles } from './static-files.ts';

export { hasDisplay } from './browser.ts';

export interface ServeOptions {
  /** A study to open, as an absolute path, or null. */
  readonly study: string | null;
  /** Whether to hand the address to the person's browser. */
  readonly open: boolean;
  /** 0 for any free port. */
  readonly port: number;
}

/** Serves a session to browser windows until Ctrl-C; the exit code. */
export async function serve({ study, open, port }: ServeOptions): Promise<number> {
  const settings = settingsFolder();
  const log = faultLog(join(settings, 'faults.log'), () => new Date().toISOString());
  const places = placesOfApp();
  let shell: Loopback | null = null;
  const comeForward = (): void => {
    if (shell !== null) void offer(shell, open);
  };
  const session = createSession(surroundings(places.demo, settings, comeForward));
  const stopped = interrupted();
  try {
    shell = await startLoopback({
      session,
      files: new StaticFiles(places.window, { '/favicon.ico': places.favicon }),
      port,
      onFault: (where, error) => void log(where, error),
    });
    if (study !== null) await openFirst(session, study);
    await Promise.race([offer(shell, open), stopped]);
    say('Press Enter for another address, or Ctrl-C to close the study and stop.');
    const lines = createInterface({ input: process.stdin });
    lines.on('line', () => shell !== null && say(`\n  ${shell.newAddress()}\n`));
    await stopped;
    lines.close();
    await shell.close();
  } catch (error) {
    if (!isPortTaken(error)) throw error;
    process.stderr.write(`Port ${port} is in use. Choose another with --port, or leave it out.\n`);
    return 1;
  } finally {
    await session.close();
  }
  return 0;
}

function say(text: string): void {
  process.stdout.write(`${text}\n`);
}

async function openFirst({ handlers }: Session, path: string): Promise<void> {
  const answer = await handlers.openStudy(
    { path, readOnly: false },
    { onProgress: () => undefined, signal: new AbortController().signal },
  );
  // The window opens all the same, and offers other studies.
  if (isRefusedAloud(answer)) say(answer.refused);
}

/** The window itself asks for the password of a locked study. */
function isRefusedAloud(answer: Answer<unknown>): answer is Refused {
  return 'refused' in answer && answer.code !== 'locked';
}

/** How long a browser may take to come to the address, in milliseconds. */
const patience = 12_000;

/** Shows a window in the person's browser, or says where one can be opened. */
async function offer(shell: Loopback, open: boolean): Promise<void> {
  const address = shell.newAddress();
  if (open && (await cameToWindow(shell, address))) {
    say('Understory is open in your browser. It stays on this machine and uses no network.');
    return;
  }
  say(`Open this address in a browser on this machine:\n\n  ${address}\n`);
  say('The address works once and for five minutes.');
}

/** Whether a browser came to the address: openers report success where nothing was shown. */
function cameToWindow(shell: Loopback, address: string): Promise<boolean> {
  return new Promise((resolve) => {
    const timer = setTimeout(() => resolve(false), patience);
    const end = (came: boolean): void => {
      clearTimeout(timer);
      resolve(came);
    };
    void shell.nextWindow().then(() => end(true));
    void openerFailed(address).then(() => end(false));
  });
}

function surroundings(demoFolder: string, settings: string, comeForward: () => void): Surroundings {
  return {
    about: {
      version,
      shell: 'browser',
      dialogs: false,
      studiesFolder: studiesFolder(),
      platform: process.platform,
      locale: new Intl.DateTimeFormat().resolvedOptions().locale,
    },
    dialogs: null,
    recent: recentPaths(join(settings, 'recent.json')),
    backups: backupStore(join(settings, 'backups.json')),
    machine: machineSettings(join(settings, 'machine.json')),
    lock: lockSettings(join(settings, 'lock.json')),
    demoFolder,
    now: () => new Date().toISOString(),
    readerName: accountName(),
    comeForward,
  };
}

function interrupted(): Promise<void> {
  return new Promise((resolve) => {
    for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP'] as const) {
      process.once(signal, () => resolve());
    }
  });
}

function isPortTaken(error: unknown): boolean {
  const code = error instanceof Error && 'code' in error ? error.code : null;
  return code === 'EADDRINUSE' || code === 'EACCES';
}
