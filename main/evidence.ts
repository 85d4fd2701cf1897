import {
  howManyResult,
  materialOf,
  planHowMany,
  planSteadiness,
  steadinessResult,
  type Base,
  type EvidenceRefused,
  type HowManyResult,
  type Material,
  type NumberScores,
  type Refit,
  type SteadinessResult,
} from '../engine/evidence/index.ts';
import type { EvidenceKind, PlainValue } from '../engine/study/index.ts';
import { askedOf, storedJob, type Fitted } from '../engine/themes/index.ts';
import type { Desk, DeskResult } from './desk.ts';
import { runEvidence, type EvidenceOptions } from './work/run-evidence.ts';

export type EvidenceMade<Value> =
  | DeskResult<Value>
  | EvidenceRefused
  | { readonly ok: false; readonly code: 'no fit yet' }
  | { readonly ok: false; readonly code: 'stopped' };

export interface SteadinessOptions extends EvidenceOptions {
  /** How many re-fits, from 2. */
  readonly resamples: number;
  /** Says who is left out and how words are shuffled; the fit's own seed unless told. */
  readonly seed?: number;
}

/**
 * Measures how steady the themes of the fit on screen are, with the floor that shuffled words reach,
 * and keeps the result with the fit. Everything is measured on the words of that fit and under the
 * decisions that it took in; what was decided since waits for the next fit.
 */
export async function gatherSteadiness(
  desk: Desk,
  { resamples, seed: given, ...options }: SteadinessOptions,
): Promise<EvidenceMade<SteadinessResult>> {
  const fitted = desk.fitted(desk.study.fit);
  if (fitted === null) return { ok: false, code: 'no fit yet' };
  const material = materialFor(desk, fitted);
  const seed = given ?? material.seed;
  const plan = planSteadiness(material, resamples, seed);
  if (!plan.ok) return plan;
  const half = (from: number): EvidenceOptions => ({
    ...options,
    onProgress: (fraction) => options.onProgress?.(from + fraction / 2),
  });
  const first = await runEvidence(material, plan.first, half(0));
  if (first === null) return { ok: false, code: 'stopped' };
  const shuffledThemes = first.at(-1) as Float32Array;
  const second = await runEvidence(plan.shuffled(shuffledThemes), plan.second, half(0.5));
  if (second === null) return { ok: false, code: 'stopped' };
  const result = steadinessResult(
    plan,
    seed,
    first[0] as Base,
    first.slice(1, -1) as Refit[],
    second[0] as Base,
    second.slice(1) as Refit[],
  );
  return keep(desk, fitted, 'steadiness', result);
}

export interface HowManyOptions extends EvidenceOptions {
  /** Numbers of themes to try, ascending. */
  readonly numbers: readonly number[];
  readonly seed?: number;
}

/** Tries numbers of themes on the words of the fit on screen and keeps the result with the fit. */
export async function gatherHowMany(
  desk: Desk,
  { numbers, seed: given, ...options }: HowManyOptions,
): Promise<EvidenceMade<HowManyResult>> {
  const fitted = desk.fitted(desk.study.fit);
  if (fitted === null) return { ok: false, code: 'no fit yet' };
  const material = materialFor(desk, fitted);
  const seed = given ?? material.seed;
  const plan = planHowMany(material, numbers, seed);
  if (!plan.ok) return plan;
  const scores = await runEvidence(plan.material, plan.tasks, options);
  if (scores === null) return { ok: false, code: 'stopped' };
  return keep(desk, fitted, 'how many', howManyResult(plan, seed, scores as NumberScores[]));
}

/** What a fit was a function of, from the study as it was when the fit was begun. */
export function materialFor(desk: Desk, fitted: Fitted): Material {
  const { fit, words, phi } = fitted;
  const job = storedJob(desk.studyAt(fit.basis), fit, { words, hash: fit.hashes.words }, (id) =>
    desk.fitted(id),
  );
  const asked = askedOf({ ...job, pinnedFrom: null }, words);
  return materialOf(
    { ...asked, seed: job.seed, settings: job.model, counts: words.counts, phi },
    words.passages.map(({ participant }) => participant),
  );
}

function keep<Value extends PlainValue>(
  desk: Desk,
  { fit }: Fitted,
  what: EvidenceKind,
  result: Value,
): EvidenceMade<Value> {
  const before = desk.study.fits.get(fit.id)?.evidence?.[what] ?? null;
  const made = desk.make([
    { edit: { kind: 'evidenceGathered', fit: fit.id, what, result, before } },
  ]);
  return made.ok ? { ok: true, value: result } : made;
}
