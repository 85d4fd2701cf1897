import type { Counts, Priors } from './types.ts';

/** The priors written out, rows of K values, f64; what `Priors` says sparsely. */
export interface DensePriors {
  readonly themes: number;
  /** alpha_dk, D x K. */
  readonly alpha: Float64Array;
  /** eta_kw, K x V; the rows of pinned themes are 0. */
  readonly eta: Float64Array;
  /** phi of each pinned theme with shut-out words at 0, null where the theme moves. */
  readonly pinned: readonly (Float32Array | null)[];
  /** Themes that a decision raises somewhere, in a word or in a passage, above their base. */
  readonly raised: readonly boolean[];
  /** Words that a decision raises in a theme above the base. */
  readonly seeds: readonly { readonly theme: number; readonly word: number }[];
}

/**
 * Writes priors out, once they are found sound.
 *
 * Where decisions cannot all be kept: a passage whose themes are all rejected is taken as undecided,
 * since its proportions must still sum to 1; a word shut out of a pinned theme has share 0 there and
 * leaves its share to the theme's other words.
 */
export function densePriors(caller: string, counts: Counts, priors: Priors): DensePriors {
  checkPriors(caller, counts, priors);
  const { themes } = priors;
  const { passages, words } = counts;

  const base = new Float64Array(themes).fill(priors.alpha);
  for (const { theme, value } of priors.themeAlpha ?? []) base[theme] = value;
  const alpha = new Float64Array(passages * themes);
  for (let d = 0; d < passages; d++) alpha.set(base, d * themes);
  for (const { passage, theme, value } of priors.passagePriors) {
    alpha[passage * themes + theme] = value;
  }
  for (const { passage } of priors.passagePriors) {
    const row = alpha.subarray(passage * themes, (passage + 1) * themes);
    if (row.every((value) => value === 0)) row.set(base);
  }

  const eta = new Float64Array(themes * words).fill(priors.eta);
  for (const { theme, word, value } of priors.wordPriors) eta[theme * words + word] = value;

  const seeds = priors.wordPriors.filter(
    ({ theme, word }) => eta[theme * words + word] > priors.eta,
  );
  const raised = new Array<boolean>(themes).fill(false);
  for (const { theme } of seeds) raised[theme] = true;
  for (const { theme, value } of priors.passagePriors) {
    if (value > base[theme]) raised[theme] = true;
  }

  const pinned = new Array<Float32Array | null>(themes).fill(null);
  for (const { theme, phi } of priors.frozen) {
    const row = eta.subarray(theme * words, (theme + 1) * words);
    pinned[theme] = withoutShutOut(phi, row);
    row.fill(0);
  }
  return { themes, alpha, eta, pinned, raised, seeds };
}

function withoutShutOut(phi: Float32Array, eta: Float64Array): Float32Array {
  let kept = 0;
  let lost = 0;
  for (let w = 0; w < phi.length; w++) {
    if (eta[w] === 0) lost += phi[w];
    else kept += phi[w];
  }
  if (lost === 0) return phi;
  return phi.map((share, w) => (eta[w] === 0 ? 0 : kept > 0 ? share / kept : 0));
}

function checkPriors(caller: string, counts: Counts, priors: Priors): void {
  const { themes, alpha, eta } = priors;
  const fail = (argument: string, value: unknown, requirement: string): never => {
    throw new Error(`${caller}: ${argument} is ${String(value)}; must be ${requirement}`);
  };
  const within = (argument: string, value: number, limit: number): void => {
    if (!(Number.isInteger(value) && value >= 0 && value < limit)) {
      fail(argument, value, `a whole number from 0 to ${limit - 1}`);
    }
  };
  const strength = (argument: string, value: number): void => {
    if (!(value >= 0 && value < Infinity)) fail(argument, value, 'finite and from 0');
  };
  if (!(Number.isInteger(themes) && themes >= 1)) fail('priors.themes', themes, 'at least 1');
  if (!(alpha > 0 && alpha < Infinity)) fail('priors.alpha', alpha, 'finite and above 0');
  if (!(eta > 0 && eta < Infinity)) fail('priors.eta', eta, 'finite and above 0');
  for (const { theme, value } of priors.themeAlpha ?? []) {
    within('priors.themeAlpha.theme', theme, themes);
    if (!(value > 0 && value < Infinity)) {
      fail('priors.themeAlpha.value', value, 'finite and above 0');
    }
  }
  for (const { theme, word, value } of priors.wordPriors) {
    within('priors.wordPriors.theme', theme, themes);
    within('priors.wordPriors.word', word, counts.words);
    strength('priors.wordPriors.value', value);
  }
  for (const { passage, theme, value } of priors.passagePriors) {
    within('priors.passagePriors.passage', passage, counts.passages);
    within('priors.passagePriors.theme', theme, themes);
    strength('priors.passagePriors.value', value);
  }
  const frozen = new Set<number>();
  for (const { theme, phi } of priors.frozen) {
    within('priors.frozen.theme', theme, themes);
    if (frozen.has(theme)) fail('priors.frozen.theme', theme, 'named once');
    frozen.add(theme);
    if (phi.length !== counts.words) {
      fail('priors.frozen.phi.length', phi.length, `words = ${counts.words}`);
    }
    for (const share of phi) strength('priors.frozen.phi', share);
  }
}
