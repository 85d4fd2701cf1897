import { methodNumber } from '../engine/model/index.ts';
import { sha256 } from '../engine/numbers/index.ts';
import {
  apply,
  emptyStudy,
  type BlobRef,
  type Entry,
  type Fit,
  type FitId,
  type Study,
} from '../engine/study/index.ts';
import {
  recordedSettings,
  storedJob,
  unpackFitted,
  unpackWords,
  type Fitted,
} from '../engine/themes/index.ts';
import { openStudyFile, type Damage, type OpenOptions, type StudyFile } from './project/index.ts';
import type { StudyFileFailure } from './project/index.ts';
import { runFit, type FitOptions } from './work/run-fit.ts';

/** What came of one stored fit. */
export type FitFound =
  /** Made again from its stored words, it came out the same, bit for bit. */
  | { readonly code: 'holds' }
  /** What is stored is not what was recorded, or the fit comes out otherwise. */
  | {
      readonly code: 'differs';
      readonly what: 'stored words' | 'stored result' | 'priors' | 'result';
    }
  /** Its own words were erased, or those of the fit that it begins from. */
  | { readonly code: 'sealed'; readonly at: number }
  | { readonly code: 'sealed before'; readonly fit: number; readonly at: number }
  /** Nothing to hold against it: compacted away, another method's, stopped half-way, or cancelled. */
  | { readonly code: 'compacted' | 'other method' | 'other settings' | 'stopped' | 'cancelled' };

export interface FitCheck {
  /** The record of the fit. */
  readonly sequence: number;
  readonly fit: Fit;
  readonly at: string;
  readonly found: FitFound;
}

export type HeadFound =
  | { readonly code: 'last' }
  /** It stands further up the chain: the study went on since. */
  | { readonly code: 'earlier'; readonly sequence: number }
  | { readonly code: 'not there' };

/** A fault in what the file holds. */
export type TrailFault =
  | ({ readonly code: 'damage' } & Damage)
  /** An edit that does not follow from those before it. */
  | { readonly code: 'edit'; readonly sequence: number; readonly why: string }
  /** Content that is gone and that no seal tells of. */
  | { readonly code: 'removed'; readonly sequence: number };

export interface Verified {
  readonly head: string;
  readonly records: number;
  readonly edits: number;
  /** Null where no hash was given. */
  readonly noted: HeadFound | null;
  readonly faults: readonly TrailFault[];
  readonly fits: readonly FitCheck[];
  /** `not checked`: nothing differs, and something could not be held against anything. */
  readonly outcome: 'holds' | 'differs' | 'not checked';
}

export interface VerifyOptions extends Omit<FitOptions, 'onProgress'> {
  /** A chain hash that was noted elsewhere, hex; the beginning of one is enough. */
  readonly head?: string;
  /** After each fit, and within it. */
  readonly onProgress?: (done: number, of: number, fraction: number) => void;
  /** Told of each fit as soon as it is known. */
  readonly onFit?: (check: FitCheck) => void;
}

/** The fewest digits by which a chain hash is looked for. */
export const leastHeadDigits = 12;

/**
 * Opens a study for reading alone and verifies it. What keeps it from being opened at all is a
 * failure, but for damage, which is a finding.
 */
export async function verifyFile(
  path: string,
  options: VerifyOptions & Pick<OpenOptions, 'password'>,
): Promise<{ readonly ok: true; readonly value: Verified } | StudyFileFailure> {
  const { password } = options;
  const opened = await openStudyFile(path, {
    readOnly: true,
    ...(password === undefined ? {} : { password }),
  });
  if (opened.ok) {
    try {
      return { ok: true, value: await verify(opened.value, options) };
    } finally {
      opened.value.close();
    }
  }
  const { code, offset, sequence, reason } = opened;
  if (code !== 'damaged' || offset === undefined || sequence === undefined) return opened;
  const fault: TrailFault = { code: 'damage', offset, sequence, reason: reason ?? 'content' };
  return { ok: true, value: damaged(fault) };
}

/**
 * Verifies an open study: reads every byte of the file again, folds the trail, makes every fit again
 * from its stored words, and compares. What the chain cannot show (records cut off the end, a chain
 * made anew) only `options.head` can.
 */
export async function verify(file: StudyFile, options: VerifyOptions = {}): Promise<Verified> {
  const damage = await file.check();
  if (damage !== null) return damaged({ code: 'damage', ...damage });

  const faults: TrailFault[] = unexplainedRemovals(file);
  const entries: Entry[] = [];
  let study = emptyStudy;
  for (const { sequence, json } of file.edits()) {
    const entry = { ...(json as Omit<Entry, 'sequence'>), sequence };
    const why = faultOfEntry(study, entry);
    if (typeof why === 'string') {
      faults.push({ code: 'edit', sequence, why });
      break;
    }
    study = why;
    entries.push(entry);
  }
  const noted = options.head === undefined ? null : findHead(file, options.head);
  const fits = faults.length > 0 ? [] : await checkFits(file, entries, options);
  const differs =
    faults.length > 0 ||
    noted?.code === 'not there' ||
    fits.some(({ found }) => found.code === 'differs');
  const sure = fits.every(({ found: { code } }) => code === 'holds' || code.startsWith('sealed'));
  return {
    head: file.head,
    records: file.records.length,
    edits: entries.length,
    noted,
    faults,
    fits,
    outcome: differs ? 'differs' : sure ? 'holds' : 'not checked',
  };
}

function damaged(fault: TrailFault): Verified {
  const nothing = { head: '', records: 0, edits: 0, noted: null, fits: [] };
  return { ...nothing, faults: [fault], outcome: 'differs' };
}

/** The study after one more entry, or why it cannot be applied. */
function faultOfEntry(study: Study, entry: Entry): Study | string {
  try {
    const next = apply(study, entry);
    return next.ok ? next.value : next.code;
  } catch {
    return 'no edit that is known';
  }
}

/**
 * Whoever takes content out by hand leaves the chain whole. Of edits a seal has to tell it; arrays of
 * fits may have been compacted away, which is found with the fits.
 */
function unexplainedRemovals(file: StudyFile): TrailFault[] {
  const told = new Set(file.erased.flatMap(({ removed, sequence }) => [...removed, sequence]));
  return file.records
    .filter(({ sequence, removed, kind }) => removed && kind !== 'blob' && !told.has(sequence))
    .map(({ sequence }) => ({ code: 'removed', sequence }));
}

function findHead(file: StudyFile, given: string): HeadFound {
  const wanted = given.toLowerCase();
  if (wanted.length < leastHeadDigits || !/^[0-9a-f]+$/u.test(wanted)) return { code: 'not there' };
  if (file.head.startsWith(wanted)) return { code: 'last' };
  for (const { sequence, hash } of file.chain()) {
    if (hash.startsWith(wanted)) return { code: 'earlier', sequence };
  }
  return { code: 'not there' };
}

interface Stored {
  readonly sequence: number;
  readonly at: string;
  readonly fit: Fit;
}

async function checkFits(
  file: StudyFile,
  entries: readonly Entry[],
  options: VerifyOptions,
): Promise<FitCheck[]> {
  const stored = entries.flatMap(({ sequence, at, undoes, edit }): Stored[] =>
    edit.kind === 'modelFitted' && undoes === undefined ? [{ sequence, at, fit: edit.fit }] : [],
  );
  const sealedAt = new Map(
    entries.flatMap(({ sequence, edit }) =>
      edit.kind === 'fitsForgotten' ? edit.fits.map((id) => [id, sequence] as const) : [],
    ),
  );
  const checks: FitCheck[] = [];
  let then = emptyStudy;
  let next = 0;
  for (const [index, { sequence, at, fit }] of stored.entries()) {
    // Fits begin in the order in which they are recorded, but for one that overtook another.
    if (then.sequence > fit.basis) [then, next] = [emptyStudy, 0];
    for (; next < entries.length && entries[next].sequence <= fit.basis; next++) {
      const applied = apply(then, entries[next]);
      if (applied.ok) then = applied.value;
    }
    const onProgress = (fraction: number): void =>
      options.onProgress?.(index, stored.length, fraction);
    onProgress(0);
    const found = await new FitReplay(file, then, stored, sealedAt).check(fit, {
      ...(options.signal === undefined ? {} : { signal: options.signal }),
      ...(options.workers === undefined ? {} : { workers: options.workers }),
      onProgress: (_, fraction) => onProgress(fraction),
    });
    const check: FitCheck = { sequence, fit, at, found };
    checks.push(check);
    options.onFit?.(check);
  }
  return checks;
}

/** Thrown where the arrays of another fit are asked for and gone. */
class Gone extends Error {
  readonly fit: FitId;
  constructor(fit: FitId) {
    super('Gone');
    this.fit = fit;
  }
}

class FitReplay {
  readonly #file: StudyFile;
  readonly #then: Study;
  readonly #stored: readonly Stored[];
  readonly #sealedAt: ReadonlyMap<FitId, number>;

  constructor(
    file: StudyFile,
    then: Study,
    stored: readonly Stored[],
    sealedAt: ReadonlyMap<FitId, number>,
  ) {
    this.#file = file;
    this.#then = then;
    this.#stored = stored;
    this.#sealedAt = sealedAt;
  }

  async check(fit: Fit, options: FitOptions): Promise<FitFound> {
    if (!this.#has(fit.words) || !this.#has(fit.result)) return this.#gone(fit);
    const words = this.#file.readBlob(fit.words.sequence);
    const result = this.#file.readBlob(fit.result.sequence);
    if (sha256(words) !== fit.hashes.words) return { code: 'differs', what: 'stored words' };
    if (sha256(result) !== fit.hashes.result) return { code: 'differs', what: 'stored result' };
    if (fit.method !== methodNumber) return { code: 'other method' };
    if (!sameModelSettings(fit)) return { code: 'other settings' };
    if (fit.stopReason === 'stopped by a person') return { code: 'stopped' };
    if (isCancelled(options)) return { code: 'cancelled' };
    try {
      const counted = { words: unpackWords(words), hash: fit.hashes.words };
      const job = storedJob(this.#then, fit, counted, (id) => this.#fitted(id));
      const again = await runFit(job, options);
      if (isCancelled(options)) return { code: 'cancelled' };
      if (!again.ok || again.hashes.priors !== fit.hashes.priors) {
        return { code: 'differs', what: 'priors' };
      }
      const same = again.hashes.result === fit.hashes.result && again.bound === fit.bound;
      return same ? { code: 'holds' } : { code: 'differs', what: 'result' };
    } catch (error) {
      if (error instanceof Gone) return this.#goneBefore(error.fit);
      throw error;
    }
  }

  #fitted(id: FitId): Fitted {
    const fit = this.#then.fits.get(id);
    if (fit === undefined) throw new Gone(id);
    if (!this.#has(fit.words) || !this.#has(fit.result)) throw new Gone(id);
    const words = unpackWords(this.#file.readBlob(fit.words.sequence));
    return unpackFitted(fit, words, this.#file.readBlob(fit.result.sequence));
  }

  #has({ sequence }: BlobRef): boolean {
    const record = this.#file.records[sequence - 1];
    return record?.kind === 'blob' && !record.removed;
  }

  #gone({ id }: Fit): FitFound {
    const at = this.#sealedAt.get(id);
    return at === undefined ? { code: 'compacted' } : { code: 'sealed', at };
  }

  #goneBefore(id: FitId): FitFound {
    const at = this.#sealedAt.get(id);
    const fit = this.#stored.find((one) => one.fit.id === id)?.sequence;
    return at === undefined || fit === undefined
      ? { code: 'compacted' }
      : { code: 'sealed before', fit, at };
  }
}

function isCancelled({ signal }: FitOptions): boolean {
  return signal?.aborted === true;
}

/** What the model's settings are by default may change without its method doing so. */
function sameModelSettings({ settings }: Fit): boolean {
  const now = recordedSettings(settings);
  return Object.keys(now).every(
    (key) =>
      !key.startsWith('model.') || JSON.stringify(now[key]) === JSON.stringify(settings[key]),
  );
}
