import { createHash } from 'node:crypto';
import * as fs from 'node:fs';
import * as net from 'node:net';
import { tmpdir } from 'node:os';
import * as path from 'node:path';
import type { FileIdentity } from './storage.ts';

/**
 * One writer a study on one machine: whoever listens at the address made from the file's identity
 * holds the lock. The system takes the address away with the process, however it ends; no file of
 * ours has to be believed. A second opener may knock, and the holder's window comes forward. Nothing
 * about the study passes over it.
 */
export interface WritersLock {
  /** False once somebody else took the address, which only a socket in a folder allows. */
  held(): boolean;
  release(): void;
}

export type LockResult =
  | { readonly ok: true; readonly lock: WritersLock }
  | { readonly ok: false; readonly why: 'taken' }
  | { readonly ok: false; readonly why: 'impossible'; readonly cause: string };

/** 'name' is a pipe's or socket's name without a file; 'folder' is a socket file. */
export type LockPlace = 'name' | 'folder';

const KNOCK = 'come forward\n';
const ANSWER = 'coming\n';
const PATIENCE_MILLISECONDS = 2_000;

export function usualLockPlace(): LockPlace {
  return process.platform === 'win32' || process.platform === 'linux' ? 'name' : 'folder';
}

export async function takeWritersLock(
  identity: FileIdentity,
  onKnock: () => void,
  place: LockPlace = usualLockPlace(),
): Promise<LockResult> {
  if (place === 'name') {
    const named = await listen(addressOf(identity, 'name'), onKnock, () => true);
    const tooOld = !named.ok && named.why === 'impossible' && process.platform === 'linux';
    if (!tooOld) return named;
  }
  const address = addressOf(identity, 'folder');

  // A killed process leaves its socket file: one that refuses is stale. Between seeing that and
  // removing it another opener may have put a new one there, hence the look at what is removed, the
  // further rounds, and held() before each write.
  for (let round = 0; round < 5; round++) {
    const before = fileAt(address);
    if (before !== null) {
      if (await answers(address)) return { ok: false, why: 'taken' };
      if (fileAt(address) === before) removeIfThere(address);
    }
    const result = await listen(address, onKnock, () => {
      const now = fileAt(address);
      // Gone is not taken: some systems clear old files from the temporary folder.
      return now === null || now === mine;
    });
    const mine = fileAt(address);
    if (result.ok || result.why === 'impossible') return result;
  }
  return { ok: false, why: 'taken' };
}

/** Asks the window that holds the lock to come forward. False where nobody answers. */
export async function knock(
  identity: FileIdentity,
  place: LockPlace = usualLockPlace(),
): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = net.connect(addressOf(identity, place));
    const finish = (answered: boolean) => {
      socket.destroy();
      resolve(answered);
    };
    let heard = '';
    socket.setTimeout(PATIENCE_MILLISECONDS, () => finish(false));
    socket.on('error', () => finish(false));
    socket.on('close', () => finish(false));
    socket.on('connect', () => socket.write(KNOCK));
    socket.on('data', (data) => {
      heard += data.toString('latin1');
      if (heard.length >= ANSWER.length) finish(heard === ANSWER);
    });
  });
}

function addressOf(identity: FileIdentity, place: LockPlace): string {
  const key = createHash('sha256')
    .update(`understory study ${identity.device}:${identity.file}`)
    .digest('hex')
    .slice(0, 32);
  if (place === 'folder') return path.join(socketFolder(), `${key}.socket`);
  // On Linux a name that begins with a zero byte lives in no folder and needs no clearing up.
  return process.platform === 'win32' ? `\\\\.\\pipe\\understory-${key}` : `\0understory-${key}`;
}

function socketFolder(): string {
  const folder = path.join(tmpdir(), `understory-${process.getuid?.() ?? 'locks'}`);
  try {
    fs.mkdirSync(folder, { mode: 0o700 });
  } catch {
    // There already, or nowhere to be had: then listening says so.
  }
  return folder;
}

function listen(address: string, onKnock: () => void, held: () => boolean): Promise<LockResult> {
  return new Promise((resolve) => {
    const sockets = new Set<net.Socket>();
    const server = net.createServer((socket) => {
      sockets.add(socket);
      socket.unref();
      socket.on('close', () => sockets.delete(socket));
      socket.on('error', () => socket.destroy());
      socket.setTimeout(PATIENCE_MILLISECONDS, () => socket.destroy());
      let heard = '';
      socket.on('data', (data) => {
        heard += data.toString('latin1');
        if (heard === KNOCK) {
          socket.end(ANSWER);
          onKnock();
        } else if (heard.length >= KNOCK.length) {
          socket.destroy();
        }
      });
    });
    server.on('error', (error: NodeJS.ErrnoException) => {
      // Windows says EACCES of a pipe that another person's process holds.
      const denied = process.platform === 'win32' && error.code === 'EACCES';
      const taken = error.code === 'EADDRINUSE' || denied;
      resolve(
        taken && !server.listening
          ? { ok: false, why: 'taken' }
          : { ok: false, why: 'impossible', cause: error.code ?? 'EIO' },
      );
    });
    server.listen(address, () => {
      server.unref();
      const release = () => {
        for (const socket of sockets) socket.destroy();
        if (server.listening) server.close();
      };
      resolve({ ok: true, lock: { held: () => server.listening && held(), release } });
    });
  });
}

function answers(address: string): Promise<boolean> {
  return new Promise((resolve) => {
    const socket = net.connect(address);
    const finish = (alive: boolean) => {
      socket.destroy();
      resolve(alive);
    };
    socket.setTimeout(PATIENCE_MILLISECONDS, () => finish(true));
    socket.on('connect', () => finish(true));
    // Only a refusal says that nobody listens; when in doubt somebody does.
    socket.on('error', (error: NodeJS.ErrnoException) =>
      finish(error.code !== 'ECONNREFUSED' && error.code !== 'ENOENT'),
    );
  });
}

/** Which file is at a path: two different ones never give the same text. */
function fileAt(address: string): string | null {
  try {
    const { dev, ino, ctimeNs } = fs.lstatSync(address, { bigint: true });
    return `${dev}:${ino}:${ctimeNs}`;
  } catch {
    return null;
  }
}

function removeIfThere(address: string): void {
  try {
    fs.unlinkSync(address);
  } catch {
    // Somebody else cleared it first.
  }
}
