import { hash32 } from '../numbers/index.ts';
import { quickFitSettings } from '../model/index.ts';
import type { NumberScores } from './how-many.ts';
import { dealt, fewestPeople, leftOut, leftOutEach, oneIn } from './left-out.ts';
import { peopleHeard, type Material } from './material.ts';
import { partWithout } from './part.ts';
import { recommend, type NumberPoint, type Recommendation } from './recommend.ts';
import type { Refit } from './refit.ts';
import { shuffled } from './shuffled.ts';
import { floorOf, steadinessOf, type FitNumbers, type Floor } from './steadiness.ts';
import type { Base } from './base.ts';
import type { Task } from './tasks.ts';

/**
 * The number of the rules in this folder. It goes up with every change after which the same study
 * would give other figures.
 */
export const evidenceMethod = 1;

export type EvidenceRefused =
  | {
      readonly ok: false;
      readonly code: 'too few participants';
      readonly people: number;
      readonly least: number;
    }
  | {
      readonly ok: false;
      readonly code: 'too many themes';
      readonly themes: number;
      readonly passages: number;
    };

/** Everything about one fit. Plain JSON, stored with it. */
export type SteadinessResult = FitNumbers & {
  readonly what: 'steadiness';
  readonly method: number;
  readonly seed: number;
  /** People who say counted words, and how many of them each re-fit leaves out. */
  readonly people: number;
  readonly leftOut: number;
  readonly floor: Floor;
};

/** A range of numbers of themes. Plain JSON, stored with the fit on screen when it was made. */
export type HowManyResult = {
  readonly what: 'how many';
  readonly method: number;
  readonly seed: number;
  readonly people: number;
  /** Groups of people that were held out in turn. */
  readonly groups: number;
  readonly points: readonly NumberPoint[];
  readonly recommendation: Recommendation;
};

/** The steps of steadiness: first everything of the study, then the same of the shuffled study. */
export interface SteadinessPlan {
  readonly ok: true;
  readonly people: number;
  /** 'base', then the re-fits, then the shuffled fit. */
  readonly first: readonly Task[];
  /** The same study with its words shuffled, once its themes are found. */
  readonly shuffled: (phi: Float32Array) => Material;
  /** 'base', then the re-fits. */
  readonly second: readonly Task[];
}

/** `resamples` from 2; the seed says who is left out and how the words are shuffled. */
export function planSteadiness(
  material: Material,
  resamples: number,
  seed: number,
): SteadinessPlan | EvidenceRefused {
  const people = peopleHeard(material);
  if (people.length < fewestPeople) return tooFew(people);
  const outs = leftOut(people, resamples, seed);
  const fault = tooMany(material, outs, material.priors.themes);
  if (fault !== null) return fault;
  const refits = outs.map((out): Task => ({ kind: 'refit', out }));
  const shuffleSeed = hash32(seed, 1, 0);
  return {
    ok: true,
    people: people.length,
    first: [{ kind: 'base' }, ...refits, { kind: 'shuffled fit', seed: shuffleSeed }],
    shuffled: (phi) => ({ ...material, counts: shuffled(material.counts, shuffleSeed), phi }),
    second: [{ kind: 'base' }, ...refits],
  };
}

export function steadinessResult(
  { people }: SteadinessPlan,
  seed: number,
  base: Base,
  refits: readonly Refit[],
  shuffledBase: Base,
  shuffledRefits: readonly Refit[],
): SteadinessResult {
  return {
    what: 'steadiness',
    method: evidenceMethod,
    seed,
    people,
    leftOut: leftOutEach(people),
    ...steadinessOf(base, refits),
    floor: floorOf(shuffledBase, shuffledRefits),
  };
}

/** Shuffled words need no error of their own: two groups give their mean. */
const shuffledGroups = 2;

export interface HowManyPlan {
  readonly ok: true;
  readonly people: number;
  readonly groups: number;
  readonly material: Material;
  /** For each number of themes, the study and then the shuffled study. */
  readonly tasks: readonly Task[];
}

/**
 * `numbers` of themes, ascending. Decisions are left aside, and every fit is made by the quick recipe:
 * numbers are compared with one another, not with the fit on screen.
 */
export function planHowMany(
  material: Material,
  numbers: readonly number[],
  seed: number,
): HowManyPlan | EvidenceRefused {
  const people = peopleHeard(material);
  if (people.length < fewestPeople) return tooFew(people);
  const groups = dealt(people, Math.min(oneIn, people.length), seed);
  const fault = tooMany(material, groups, Math.max(...numbers));
  if (fault !== null) return fault;
  const shuffle = hash32(seed, 1, 0);
  return {
    ok: true,
    people: people.length,
    groups: groups.length,
    material: { ...material, settings: { ...quickFitSettings, boundEvery: 0 } },
    tasks: numbers.flatMap((themes): Task[] => [
      { kind: 'number', asked: { themes, groups, shuffle: null } },
      { kind: 'number', asked: { themes, groups: groups.slice(0, shuffledGroups), shuffle } },
    ]),
  };
}

/** Takes the results of the plan's tasks in their order. */
export function howManyResult(
  { people, groups }: HowManyPlan,
  seed: number,
  scores: readonly NumberScores[],
): HowManyResult {
  const points = scores
    .filter((_score, i) => i % 2 === 0)
    .map((score, i): NumberPoint => {
      const { perplexity, coherence, steadiness } = scores[2 * i + 1];
      return { ...score, floor: { perplexity, coherence, steadiness } };
    });
  return {
    what: 'how many',
    method: evidenceMethod,
    seed,
    people,
    groups,
    points,
    recommendation: recommend(points),
  };
}

function tooFew(people: readonly number[]): EvidenceRefused {
  return { ok: false, code: 'too few participants', people: people.length, least: fewestPeople };
}

/** Refuses more themes than there are passages with counted words in some part of the study. */
function tooMany(
  { counts, people }: Material,
  outs: readonly (readonly number[])[],
  themes: number,
): EvidenceRefused | null {
  const passages = Math.min(
    ...outs.map((out) => {
      const { offsets, passages: rows } = partWithout(counts, people, out).counts;
      let counted = 0;
      for (let d = 0; d < rows; d++) if (offsets[d + 1] > offsets[d]) counted++;
      return counted;
    }),
  );
  return themes > passages ? { ok: false, code: 'too many themes', themes, passages } : null;
}
