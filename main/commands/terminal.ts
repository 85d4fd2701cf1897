import type { BackupSettings } from '../backup-settings.ts';

/** Where a command gets the password of a locked study from. */
export interface PasswordSource {
  /** The file given with --password-file, as it was typed; null without one. */
  readonly file: string | null;
  /** What the environment says; null where it says nothing. */
  readonly environment: string | null;
  /** Asks without showing what is typed; null where nobody can type. */
  readonly ask: ((question: string) => Promise<string | null>) | null;
}

/** Where a command reads its paths from and writes its lines to. */
export interface Terminal {
  /** Paths are meant from here. */
  readonly folder: string;
  readonly out: (text: string) => void;
  readonly err: (text: string) => void;
  /** Whether a line on `err` can be written over. */
  readonly rewrites: boolean;
  readonly now: () => string;
  /** Aborted when a person asks the command to stop. */
  readonly signal: AbortSignal;
  /** Where passwords come from; from nowhere unless told. */
  readonly password?: PasswordSource;
  /** How backups are kept on this machine; the usual unless told. */
  readonly backups?: () => BackupSettings;
}

/** 0 done, 1 could not be done, 2 the command was not understood; `verify` says 3 for: cannot tell. */
export type ExitCode = 0 | 1 | 2 | 3;

/** One line that says how far a long step is; written over where the terminal can. */
export class ProgressLine {
  readonly #terminal: Terminal;
  #last = '';
  #shown = 0;
  #lastPercent = -100;

  constructor(terminal: Terminal) {
    this.#terminal = terminal;
  }

  /** `fraction` of the step, 0 to 1. Where lines cannot be written over, one every 10 %. */
  show(text: string, fraction: number): void {
    if (text === this.#last) return;
    const percent = Math.floor(fraction * 100);
    if (!this.#terminal.rewrites && percent < this.#lastPercent + 10) return;
    this.#lastPercent = percent;
    this.#last = text;
    if (this.#terminal.rewrites) {
      this.#terminal.err(`\r${text.padEnd(this.#shown)}`);
      this.#shown = text.length;
    } else {
      this.#terminal.err(`${text}\n`);
    }
  }

  /** Ends the line, so that what follows stands on its own. */
  end(): void {
    if (this.#shown > 0) this.#terminal.err('\n');
    this.#shown = 0;
    this.#last = '';
    this.#lastPercent = -100;
  }
}

/** Ends the command where a person has asked for it. */
export function stopIfAsked({ signal }: Terminal): void {
  if (signal.aborted) throw new Stop('Stopped: nothing was written.');
}

/** A refusal that ends a command: one sentence and its exit code. */
export class Stop extends Error {
  readonly exitCode: ExitCode;
  constructor(sentence: string, exitCode: ExitCode = 1) {
    super(sentence);
    this.name = 'Stop';
    this.exitCode = exitCode;
  }
}
