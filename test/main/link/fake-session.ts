import {
  methods,
  type Answer,
  type Events,
  type Method,
  type Overview,
} from '../../../main/api.ts';
import type { CallContext, Handlers, Session } from '../../../main/window/session-types.ts';

type Handler = (takes: unknown, context: CallContext) => Promise<Answer<unknown>>;

export interface FakeSession extends Session {
  /** What was called, in order, with what it took. */
  readonly calls: { readonly method: Method; readonly takes: unknown }[];
  readonly opened: string[];
  /** How often it was closed. */
  closes: number;
  readonly tell: <Name extends keyof Events>(event: Name, detail: Events[Name]) => void;
  readonly listeners: () => number;
}

/** A session that holds no study: it notes what it is asked and answers with what a test gives. */
export function fakeSession(own: Partial<Record<Method, Handler>> = {}): FakeSession {
  const calls: FakeSession['calls'] = [];
  const opened: string[] = [];
  const listeners = new Map<string, Set<(detail: never) => void>>();
  const handlers = Object.fromEntries(
    methods.map((method): [Method, Handler] => [
      method,
      async (takes, context) => {
        calls.push({ method, takes });
        return (await own[method]?.(takes, context)) ?? { value: null };
      },
    ]),
  ) as unknown as Handlers;
  const session: FakeSession = {
    handlers,
    calls,
    opened,
    closes: 0,
    on: (event, listener) => {
      const known = listeners.get(event) ?? new Set();
      listeners.set(event, known);
      known.add(listener);
      return () => void known.delete(listener);
    },
    openPath: async (path) => void opened.push(path),
    lock: async () => {},
    close: async () => void session.closes++,
    tell: (event, detail) => {
      for (const listener of listeners.get(event) ?? []) listener(detail as never);
    },
    listeners: () => [...listeners.values()].reduce((sum, known) => sum + known.size, 0),
  };
  return session;
}

/** A word that stands for what must not leave a study. */
export const studyWord = 'Skerrabraith';

export const overview: Overview = {
  study: { id: 's1', name: studyWord, path: `/studies/${studyWord}.understory` },
  readOnly: false,
  hasPassword: false,
  savedAt: null,
  revision: 3,
  transcripts: 2,
  words: 100,
  themes: 4,
  passages: 20,
  unread: 20,
  transcriptsRead: 0,
  fitted: false,
  refining: null,
  stale: false,
  waiting: [],
  followChanges: false,
  undo: null,
  redo: null,
  reader: { id: 'r1', name: 'Ada' },
  coldSample: null,
};
