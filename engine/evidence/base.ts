import { folded } from '../model/index.ts';
import { coherence } from './coherence.ts';
import { leadingStrengths, leads } from './leads.ts';
import type { Material } from './material.ts';
import { undecided } from './part.ts';

/** A fit as it stands, by words alone: what its re-fits are compared with. */
export interface Base {
  /** NPMI of each theme, K values. */
  readonly coherence: readonly number[];
  /** The theme that leads each passage by its words alone, D values; -1 where nothing was counted. */
  readonly leads: Int32Array;
  /** Strengths of leading themes in passages with enough counted words. */
  readonly strengths: readonly number[];
}

/** A passage with fewer counted words says nothing about strength; as for suggestions. */
export const countedWordsAtLeast = 8;

export function baseOf({ counts, priors, phi, settings }: Material): Base {
  const { themes } = priors;
  const theta = folded(counts, undecided(priors), phi, settings.foldPasses);
  return {
    coherence: coherence(counts, phi),
    leads: leads(counts, themes, theta),
    strengths: leadingStrengths(counts, themes, theta, countedWordsAtLeast),
  };
}
