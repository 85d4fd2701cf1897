import type { Storage } from '../../../main/project/index.ts';
import { quickStorage } from './study-folder.ts';

export type Operation = Exclude<keyof Storage, 'mustCloseToReplace'>;

export type Fault =
  /** The operation does nothing and fails. */
  | 'fails'
  /** A write writes half of what it was asked and says so; no error. */
  | 'short'
  /** A write writes half of what it was asked and fails; any other operation takes place and fails. */
  | 'half'
  /** From this operation on nothing takes place any more: the process is as good as dead. */
  | 'dead';

export interface Plan {
  /** From 1, counting the operations in `counted`. */
  readonly at: number;
  readonly fault: Fault;
  readonly counted: readonly Operation[];
  readonly code?: string;
}

export interface FaultyStorage extends Storage {
  /** Operations counted so far. */
  readonly count: () => number;
  /** The operation that failed, once it did. */
  readonly hit: () => Operation | null;
  /** Numbers of handles that are open. */
  readonly openHandles: () => number;
  plan: Plan | null;
}

/** A storage, one of whose operations goes wrong. */
export function faultyStorage(plan: Plan | null = null, mustCloseToReplace = false): FaultyStorage {
  let count = 0;
  let hit: Operation | null = null;
  const handles = new Set<number>();
  const fail = (code: string): never => {
    throw Object.assign(new Error(`planned ${code}`), { code });
  };
  const storage: FaultyStorage = {
    ...quickStorage,
    mustCloseToReplace,
    count: () => count,
    hit: () => hit,
    plan,
    openHandles: () => handles.size,
  };

  function around<A extends unknown[], R>(
    operation: Operation,
    real: (...args: A) => R,
    half: (...args: A) => R = real,
  ): (...args: A) => R {
    return (...args) => {
      const { plan: now } = storage;
      if (now === null || !now.counted.includes(operation)) return real(...args);
      count += 1;
      const code = now.code ?? 'EIO';
      if (now.fault === 'dead' && count >= now.at) {
        if (count === now.at) {
          hit = operation;
          if (half !== real) half(...args);
        }
        return fail(code);
      }
      if (count !== now.at) return real(...args);
      hit = operation;
      if (now.fault === 'fails') return fail(code);
      const result = half(...args);
      return now.fault === 'half' ? fail(code) : result;
    };
  }

  storage.open = around(
    'open',
    (path, how, mode) => {
      const handle = quickStorage.open(path, how, mode);
      handles.add(handle);
      return handle;
    },
    (path, how, mode) => {
      // An open that fails has given nobody a handle.
      quickStorage.close(quickStorage.open(path, how, mode));
      return -1;
    },
  );
  storage.close = (handle) => {
    handles.delete(handle);
    quickStorage.close(handle);
  };
  storage.read = around('read', quickStorage.read);
  storage.write = around('write', quickStorage.write, (handle, bytes, position) =>
    quickStorage.write(handle, bytes.subarray(0, bytes.length >> 1), position),
  );
  storage.sync = around('sync', quickStorage.sync);
  storage.truncate = around('truncate', quickStorage.truncate);
  storage.stat = around('stat', quickStorage.stat);
  storage.statPath = around('statPath', quickStorage.statPath);
  storage.rename = around('rename', quickStorage.rename);
  storage.remove = around('remove', quickStorage.remove);
  storage.list = around('list', quickStorage.list);
  storage.makeFolder = around('makeFolder', quickStorage.makeFolder);
  storage.syncFolder = around('syncFolder', quickStorage.syncFolder);
  return storage;
}
