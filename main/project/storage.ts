/** What a file is, wherever its name points: two opens of one file give equal identities. */
export interface FileIdentity {
  readonly device: bigint;
  readonly file: bigint;
}

export interface FileState extends FileIdentity {
  /** In bytes. */
  readonly size: number;
  /** Permission bits. */
  readonly mode: number;
  /** False for folders, pipes, devices. */
  readonly regular: boolean;
}

/** An open file, as the storage numbers it. */
export type Handle = number;

/**
 * The file operations that a study needs, and no others, so that a test can stand in front of them
 * and make the Nth one fail. Each throws an Error with a `code` ("ENOSPC") when it fails; the rest
 * of this room turns those into values. They are synchronous because the order of write and fsync
 * is the whole point, and short because an edit is a few hundred bytes.
 */
export interface Storage {
  /** Whether a file must be closed before another can take its name, as on Windows. */
  readonly mustCloseToReplace: boolean;
  /**
   * 'read' and 'write' want an existing file; 'create' refuses an existing one and opens the new one
   * for reading and writing, with the given permission bits (0o600 unless told).
   */
  open(path: string, how: 'read' | 'write' | 'create', mode?: number): Handle;
  /** Reads into `into` from `position`; the number of bytes read, 0 at the end. */
  read(handle: Handle, into: Uint8Array, position: number): number;
  /** Writes at `position`; the number of bytes written, which may be fewer than asked. */
  write(handle: Handle, bytes: Uint8Array, position: number): number;
  /** Returns once the file's bytes and size are on the drive. */
  sync(handle: Handle): void;
  truncate(handle: Handle, size: number): void;
  stat(handle: Handle): FileState;
  statPath(path: string): FileState;
  /** The path with every link followed. */
  resolve(path: string): string;
  /** Takes the place of whatever is at `to`. */
  rename(from: string, to: string): void;
  remove(path: string): void;
  /** Names of the files in a folder. */
  list(path: string): readonly string[];
  /** Makes a folder in one that is there, where there is none of that name yet. */
  makeFolder(path: string, mode: number): void;
  /** Makes the folder's own entries lasting; does nothing where a system has no such thing. */
  syncFolder(path: string): void;
  close(handle: Handle): void;
}

export function sameFile(a: FileIdentity, b: FileIdentity): boolean {
  return a.device === b.device && a.file === b.file;
}

/** Writes all of `bytes`, going on after short writes. Throws what `write` throws. */
export function writeWhole(
  storage: Storage,
  handle: Handle,
  bytes: Uint8Array,
  position: number,
): void {
  let done = 0;
  while (done < bytes.length) {
    const written = storage.write(handle, bytes.subarray(done), position + done);
    // A drive that takes nothing and reports no error would keep us here for ever.
    if (written <= 0) throw Object.assign(new Error('nothing was written'), { code: 'EIO' });
    done += written;
  }
}

/** Reads until `into` is full or the file ends; the number of bytes read. */
export function readWhole(
  storage: Storage,
  handle: Handle,
  into: Uint8Array,
  position: number,
): number {
  let done = 0;
  while (done < into.length) {
    const read = storage.read(handle, into.subarray(done), position + done);
    if (read <= 0) break;
    done += read;
  }
  return done;
}

/** Closes where what mattered was synced or only read. */
export function closeQuietly(storage: Storage, handle: Handle): void {
  try {
    storage.close(handle);
  } catch {
    // Nothing hangs on it any more.
  }
}

/** Removes what nothing depends on, if it is there. */
export function removeQuietly(storage: Storage, path: string): void {
  try {
    storage.remove(path);
  } catch {
    // Not there, or not to be had.
  }
}
