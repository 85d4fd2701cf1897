import * as fs from 'node:fs';
import type { FileState, Storage } from './storage.ts';

function stateOf(stats: fs.BigIntStats): FileState {
  return {
    device: stats.dev,
    file: stats.ino,
    size: Number(stats.size),
    mode: Number(stats.mode) & 0o777,
    regular: stats.isFile(),
  };
}

/** Node's own file operations. */
export const nodeStorage: Storage = {
  mustCloseToReplace: process.platform === 'win32',
  open(path, how, mode = 0o600) {
    if (how === 'read') return fs.openSync(path, 'r');
    if (how === 'write') return fs.openSync(path, 'r+');
    const handle = fs.openSync(path, 'wx+', mode);
    try {
      // The process's mask may have taken bits away that a shared folder's file had.
      fs.fchmodSync(handle, mode);
    } catch {
      // Some network drives have no permission bits; the file itself is there.
    }
    return handle;
  },
  read: (handle, into, position) => fs.readSync(handle, into, 0, into.length, position),
  write: (handle, bytes, position) => fs.writeSync(handle, bytes, 0, bytes.length, position),
  sync: (handle) => fs.fsyncSync(handle),
  truncate: (handle, size) => fs.ftruncateSync(handle, size),
  stat: (handle) => stateOf(fs.fstatSync(handle, { bigint: true })),
  statPath: (path) => stateOf(fs.statSync(path, { bigint: true })),
  resolve: (path) => fs.realpathSync.native(path),
  rename: (from, to) => fs.renameSync(from, to),
  remove: (path) => fs.unlinkSync(path),
  list: (path) =>
    fs
      .readdirSync(path, { withFileTypes: true })
      .filter((entry) => entry.isFile())
      .map(({ name }) => name),
  makeFolder(path, mode) {
    try {
      fs.mkdirSync(path, { mode });
    } catch (error) {
      if ((error as { code?: string }).code !== 'EEXIST' || !fs.statSync(path).isDirectory()) {
        throw error;
      }
    }
  },
  syncFolder(path) {
    // Windows opens no folder for this and needs none: NTFS logs its own entries.
    if (process.platform === 'win32') return;
    const handle = fs.openSync(path, 'r');
    try {
      fs.fsyncSync(handle);
    } catch (error) {
      // Some network file systems refuse to sync a folder; there is nothing more to be done there.
      if (!['EINVAL', 'ENOTSUP', 'ENOSYS'].includes((error as { code?: string }).code ?? '')) {
        throw error;
      }
    } finally {
      fs.closeSync(handle);
    }
  },
  close: (handle) => fs.closeSync(handle),
};
