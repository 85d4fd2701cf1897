import type { Answer, Events, LockedStudy, Overview, Refused } from '../api.ts';
import { passingLockSettings, type LockSettings } from '../lock-settings.ts';
import { StudyFileFault } from '../project/index.ts';
import { noBackup, sentenceFor } from '../sentences/sentences.ts';
import { give, refuse } from './answers.ts';
import { BackupKeeper } from './backup-keeper.ts';
import type { OpenStudy } from './open-study.ts';
import { overview } from './overview.ts';
import type { CallContext, Surroundings } from './session-types.ts';

type Listener = (detail: never) => void;

type MaybePromise<Value> = Value | Promise<Value>;

/** A study that waits for its password. */
export interface WantedStudy {
  readonly path: string;
  readonly readOnly: boolean;
  readonly why: LockedStudy['why'];
}

/** What the families of methods share: the open study, who listens, and how a call is answered. */
export class Room {
  readonly surroundings: Surroundings;
  open: OpenStudy | null = null;
  wanted: WantedStudy | null = null;
  readonly lock: LockSettings;
  readonly #listeners = new Map<keyof Events, Set<Listener>>();
  #opening: Promise<unknown> = Promise.resolve();
  #running = 0;
  #whenQuiet: (() => void)[] = [];
  #gate: Promise<unknown> | null = null;
  #lastSeen = moment();

  readonly backups: BackupKeeper;

  constructor(surroundings: Surroundings) {
    this.surroundings = surroundings;
    this.backups = new BackupKeeper({
      store: surroundings.backups,
      now: () => surroundings.now(),
      onFailure: (failure) => this.tell('caution', noBackup(failure)),
    });
    this.lock = surroundings.lock ?? passingLockSettings();
  }

  /** A person is there. */
  seen(): void {
    this.#lastSeen = moment();
  }

  /** For how long nobody has been there. */
  idleMilliseconds(): number {
    const now = moment();
    // One of the two stands still while a machine sleeps, the other may be set back by hand.
    return Math.max(now.clock - this.#lastSeen.clock, now.steady - this.#lastSeen.steady);
  }

  /** Whether anything is at work on the open study. */
  get busy(): boolean {
    return this.#running > 0 || this.#gate !== null || fitsNow(this.open);
  }

  on<Name extends keyof Events>(event: Name, listener: (detail: Events[Name]) => void): () => void {
    const listeners = this.#listeners.get(event) ?? new Set();
    this.#listeners.set(event, listeners);
    listeners.add(listener as Listener);
    return () => void listeners.delete(listener as Listener);
  }

  tell<Name extends keyof Events>(event: Name, detail: Events[Name]): void {
    for (const listener of this.#listeners.get(event) ?? []) {
      (listener as (detail: Events[Name]) => void)(detail);
    }
  }

  /** Opening and closing go one after the other. */
  inTurn<Value>(act: () => Promise<Value>): Promise<Value> {
    const done = this.#opening.then(act);
    this.#opening = done.catch(() => {});
    return done;
  }

  /**
   * Something that may not meet any other work on the study, because its file is written anew: what
   * runs is waited for, what comes waits.
   */
  async alone<Gives>(
    act: (open: OpenStudy) => Promise<{ readonly value: Gives } | Refused>,
  ): Promise<Answer<Gives>> {
    const { open } = this;
    if (open === null) return refuse('no study');
    if (fitsNow(open)) return refuse('fit running');
    const acting = this.#quiet().then(async () =>
      this.open === open ? act(open) : refuse('no study'),
    );
    this.#gate = acting.catch(() => {});
    try {
      return await acting;
    } catch (error) {
      if (error instanceof StudyFileFault) return faultInWords(error);
      throw error;
    } finally {
      this.#gate = null;
    }
  }

  /** Waits for a person inside a method: meanwhile it does not count as work. */
  async away<Value>(waiting: Promise<Value>): Promise<Value> {
    this.#end();
    try {
      return await waiting;
    } finally {
      this.#running += 1;
    }
  }

  #end(): void {
    this.#running -= 1;
    if (this.#running === 0) for (const go of this.#whenQuiet.splice(0)) go();
  }

  #quiet(): Promise<void> {
    if (this.#running === 0) return Promise.resolve();
    return new Promise((resolve) => this.#whenQuiet.push(resolve));
  }

  /** A method that looks at the open study, once its passages are at hand. */
  look<Takes, Gives>(
    answer: (
      open: OpenStudy,
      takes: Takes,
      context: CallContext,
    ) => MaybePromise<{ readonly value: Gives } | Refused>,
  ): (takes: Takes, context: CallContext) => Promise<Answer<Gives>> {
    return async (takes, context) => {
      while (this.#gate !== null) await this.#gate;
      const open = this.open;
      if (open === null) return refuse('no study');
      this.#running += 1;
      try {
        await open.now.settled();
        if (this.open !== open) return refuse('no study');
        return await answer(open, takes, context);
      } catch (error) {
        if (error instanceof StudyFileFault) return faultInWords(error);
        // What is asked of a study that was closed meanwhile has no answer.
        if (this.open !== open) return refuse('no study');
        throw error;
      } finally {
        this.#end();
      }
    };
  }

  /** A method that decides: null where it was done, or had been done already. */
  decide<Takes>(
    act: (open: OpenStudy, takes: Takes) => MaybePromise<Refused | null>,
  ): (takes: Takes, context: CallContext) => Promise<Answer<Overview>> {
    return this.look<Takes, Overview>(async (open, takes) => {
      const refused = await act(open, takes);
      return refused ?? (await this.afterwards(open));
    });
  }

  /**
   * The overview after a decision, which everybody who listens is told; `always`, where something
   * else than a decision changed it.
   */
  async afterwards(
    open: OpenStudy,
    always = false,
  ): Promise<{ readonly value: Overview } | Refused> {
    await open.now.settled();
    if (this.open !== open) return refuse('no study');
    const now = overview(open);
    this.backups.look(open);
    if (always || open.told !== now.revision) {
      open.told = now.revision;
      this.tell('changed', now);
    }
    return give(now);
  }
}

/** Asked for, or in the background. */
function fitsNow(open: OpenStudy | null): boolean {
  return open !== null && (open.fitting || open.refinement !== null);
}

function moment(): { readonly clock: number; readonly steady: number } {
  return { clock: Date.now(), steady: performance.now() };
}

export function faultInWords({ failure }: StudyFileFault): Refused {
  return { code: failure.code, refused: sentenceFor(failure) };
}
