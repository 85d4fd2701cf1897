import type { BackupStore } from '../backup-settings.ts';
import type { About, Answer, Api, Events, FitProgress, Method, Overview } from '../api.ts';
import type { LockSettings } from '../lock-settings.ts';
import type { DerivationWork } from '../project/index.ts';

/** What a call brings along besides its payload. */
export interface CallContext {
  readonly onProgress: (progress: FitProgress) => void;
  readonly signal: AbortSignal;
}

/** One function for each method of the api. Payloads were checked before they come here. */
export type Handlers = {
  readonly [Name in Method]: (
    takes: Api[Name]['takes'],
    context: CallContext,
  ) => Promise<Answer<Api[Name]['gives']>>;
};

/** What a shell can do for a session: the system's own dialogs. Paths, or null where cancelled. */
export interface SystemDialogs {
  readonly chooseStudy: () => Promise<string | null>;
  readonly placeStudy: (name: string) => Promise<string | null>;
  readonly chooseTranscripts: () => Promise<readonly string[] | null>;
  readonly placeFile: (fileName: string) => Promise<string | null>;
  readonly chooseFolder?: (title: string) => Promise<string | null>;
}

/** Paths of studies opened lately; nothing else of them is kept. Newest first. */
export interface RecentPaths {
  readonly list: () => Promise<readonly string[]>;
  readonly add: (path: string) => Promise<void>;
  readonly remove: (path: string) => Promise<void>;
}

/** Small things kept on this machine, by a fixed key each; nothing of a study's words. */
export interface MachineSettings {
  /** Plain JSON as it was kept; undefined where nothing was. To be checked: anybody may edit it. */
  readonly get: (key: string) => Promise<unknown>;
  readonly keep: (key: string, value: unknown) => Promise<void>;
}

/** Where a session stands: given by the shell, so that tests can say. */
export interface Surroundings {
  readonly about: About;
  readonly dialogs: SystemDialogs | null;
  readonly recent: RecentPaths;
  /** How backups are kept; none are made without it. */
  readonly backups?: BackupStore;
  /** Absent where nothing is kept. */
  readonly machine?: MachineSettings;
  /** The folder of the demo's transcripts and of its attributes. */
  readonly demoFolder: string;
  readonly now: () => string;
  /** Characters times themes from which a fit from scratch shows a quick answer first. */
  readonly quickFrom?: number;
  /** How studies with a password are locked on this machine; for this run alone unless told. */
  readonly lock?: LockSettings;
  /** How dear keys are made; the usual unless told, for tests. */
  readonly keyWork?: DerivationWork;
  /** The name that a reader gets until one is typed. */
  readonly readerName: string;
  /** Brings this window to the front: somebody opened its study a second time. */
  readonly comeForward?: () => void;
}

export interface Session {
  readonly handlers: Handlers;
  readonly on: <Name extends keyof Events>(
    event: Name,
    listener: (detail: Events[Name]) => void,
  ) => () => void;
  /** Opens a study that the system handed over (a double-clicked file); a refusal is to be shown. */
  readonly openPath: (path: string) => Promise<Answer<Overview> | void>;
  /** Locks the open study where it has a password and the machine locks studies by itself. */
  readonly lock: () => Promise<void>;
  /** Closes the open study; safe to call twice. */
  readonly close: () => Promise<void>;
}
