import { placesFor, passingBackupStore, type BackupStore } from '../backup-settings.ts';
import { makeBackup, type Backup, type Result, type StudyFile } from '../project/index.ts';
import type { StudyFileFailure } from '../project/index.ts';
import type { OpenStudy } from './open-study.ts';

/** While somebody works: how long what was decided may be in the study alone, in milliseconds. */
const longestWithout = 15 * 60 * 1000;

export interface KeeperOptions {
  readonly store?: BackupStore | undefined;
  /** ISO 8601 in UTC: what stands in a backup's name. */
  readonly now: () => string;
  /** Milliseconds that only go up. */
  readonly moment?: () => number;
  /** Told once when backups begin to fail. */
  readonly onFailure: (failure: StudyFileFailure) => void;
}

/**
 * Makes a backup of a study when it was opened, from time to time while somebody works, and when it
 * is closed: never in the way of a decision, and never in the way of closing.
 */
export class BackupKeeper {
  readonly store: BackupStore;
  readonly #options: KeeperOptions;
  readonly #moment: () => number;
  readonly #last = new WeakMap<StudyFile, number>();
  #failure: StudyFileFailure | null = null;

  constructor(options: KeeperOptions) {
    this.#options = options;
    this.store = options.store ?? passingBackupStore();
    this.#moment = options.moment ?? (() => performance.now());
  }

  /** Why the last backup could not be made; null where it could. */
  get failure(): StudyFileFailure | null {
    return this.#failure;
  }

  /** To be called after each decision and after opening; makes one soon where it is time. */
  look({ file }: OpenStudy): void {
    const last = this.#last.get(file);
    if (last !== undefined && this.#moment() - last < longestWithout) return;
    this.#last.set(file, this.#moment());
    setImmediate(() => this.#quietly(file));
  }

  /** The last one of a study that is about to be closed. */
  beforeClosing({ file }: OpenStudy): void {
    this.#quietly(file);
  }

  /** Makes one now; null where the newest says the same. */
  make(file: StudyFile): Result<Backup | null> {
    const { store } = this;
    const { now } = this.#options;
    const result = makeBackup(file, placesFor(store.read(), file.path), { now });
    this.#last.set(file, this.#moment());
    const failedBefore = this.#failure !== null;
    this.#failure = result.ok ? null : result;
    if (!result.ok && !failedBefore) this.#options.onFailure(result);
    return result;
  }

  #quietly(file: StudyFile): void {
    // What is closed was backed up while it closed; what is written anew is looked at again later.
    if (file.closed || file.readOnly || file.compacting) return;
    this.make(file);
  }
}
