import type { Answer, Events, Overview, Refused } from '../api.ts';
import { StudyFileFault } from '../project/index.ts';
import { noBackup, sentenceFor } from '../sentences/sentences.ts';
import { give, refuse } from './answers.ts';
import { BackupKeeper } from './backup-keeper.ts';
import type { OpenStudy } from './open-study.ts';
import { overview } from './overview.ts';
import type { CallContext, Surroundings } from './session-types.ts';

type Listener = (detail: never) => void;

type MaybePromise<Value> = Value | Promise<Value>;

/** What the families of methods share: the open study, who listens, and how a call is answered. */
export class Room {
  readonly surroundings: Surroundings;
  open: OpenStudy | null = null;
  readonly #listeners = new Map<keyof Events, Set<Listener>>();
  #opening: Promise<unknown> = Promise.resolve();

  readonly backups: BackupKeeper;

  constructor(surroundings: Surroundings) {
    this.surroundings = surroundings;
    this.backups = new BackupKeeper({
      store: surroundings.backups,
      now: () => surroundings.now(),
      onFailure: (failure) => this.tell('caution', noBackup(failure)),
    });
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

  /** A method that looks at the open study, once its passages are at hand. */
  look<Takes, Gives>(
    answer: (
      open: OpenStudy,
      takes: Takes,
      context: CallContext,
    ) => MaybePromise<{ readonly value: Gives } | Refused>,
  ): (takes: Takes, context: CallContext) => Promise<Answer<Gives>> {
    return async (takes, context) => {
      const open = this.open;
      if (open === null) return refuse('no study');
      try {
        await open.now.settled();
        if (this.open !== open) return refuse('no study');
        return await answer(open, takes, context);
      } catch (error) {
        if (error instanceof StudyFileFault) return faultInWords(error);
        // What is asked of a study that was closed meanwhile has no answer.
        if (this.open !== open) return refuse('no study');
        throw error;
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

export function faultInWords({ failure }: StudyFileFault): Refused {
  return { code: failure.code, refused: sentenceFor(failure) };
}
