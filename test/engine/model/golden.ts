import {
  defaultMeanFieldSettings,
  fitMeanField,
  fitModel,
  quickFitSettings,
  type ModelFit,
  type Priors,
} from '../../../engine/model/index.ts';
import {
  createGenerator,
  digamma,
  exp,
  expDigamma,
  lgamma,
  log,
  sha256,
  trigamma,
} from '../../../engine/numbers/index.ts';
import { goldenWords } from './golden-words.ts';
import { plantedCorpus } from './planted.ts';

/** What is hashed; one hash each, of every bit of the result. */
export type Golden = Readonly<
  Record<
    | 'functions'
    | 'prepared words'
    | 'corpus'
    | 'from scratch'
    | 're-fit with decisions'
    | 'mean field',
    string
  >
>;

const themes = 6;
const words = 260;
const passages = 140;

/**
 * Fits of one small corpus, hashed. Nothing here knows whether it runs in Node or in a browser, nor
 * which kernel it runs on.
 */
export function golden(): Golden {
  const { counts } = plantedCorpus(passages, words, themes, 45, 11);
  const asked: Priors = {
    themes,
    alpha: 0.1,
    eta: 0.1,
    wordPriors: [
      { theme: 0, word: 3, value: 3.1 },
      { theme: 0, word: 40, value: 5 },
      { theme: 2, word: 0, value: 0 },
      { theme: 4, word: 9, value: 0 },
    ],
    passagePriors: [
      { passage: 5, theme: 1, value: 30.1 },
      { passage: 17, theme: 3, value: 0 },
    ],
    frozen: [],
  };
  const leanings = [
    { theme: 0, word: 3 },
    { theme: 0, word: 40 },
  ];
  const settings = { ...quickFitSettings, runs: 4, boundEvery: 10 };
  const scratch = fitModel(counts, asked, { kind: 'fresh', seed: 2, leanings }, settings);

  const decided: Priors = {
    ...asked,
    themeAlpha: [{ theme: 2, value: 0.2 }],
    wordPriors: [
      ...asked.wordPriors,
      { theme: 1, word: 12, value: 6.1 },
      { theme: 3, word: 1, value: 0 },
    ],
    passagePriors: [
      ...asked.passagePriors,
      { passage: 60, theme: 2, value: 45.1 },
      { passage: 61, theme: 2, value: 0 },
      { passage: 61, theme: 0, value: 0 },
    ],
    frozen: [{ theme: 5, phi: scratch.phi.slice(5 * words, 6 * words) }],
  };
  const { theta, phi } = scratch;
  const hold = new Float32Array(themes).fill(1);
  const again = [...leanings, { theme: 1, word: 12 }];
  const refit = fitModel(
    counts,
    decided,
    { kind: 'warm', theta, phi, leanings: again, hold },
    settings,
  );

  const chance = createGenerator(5);
  const lambda = Float64Array.from({ length: themes * words }, () => 0.5 + chance.uniform());
  const exact = fitMeanField(counts, decided, lambda, {
    ...defaultMeanFieldSettings,
    steps: 30,
  });

  return {
    functions: hashed(...functionValues()),
    'prepared words': hashed(...preparedWords()),
    corpus: hashed(counts.offsets, counts.indices, counts.counts),
    'from scratch': hashedFit(scratch),
    're-fit with decisions': hashedFit(refit),
    'mean field': hashed(
      exact.gamma,
      exact.lambda,
      exact.theta,
      exact.phi,
      Float64Array.from(exact.bounds),
      Float64Array.of(exact.innerSteps),
    ),
  };
}

function hashedFit(fit: ModelFit): string {
  const { boundTerms: terms, trace, sweeps, stopReason } = fit;
  // The terms of each point add up to its bound, which is hashed.
  const points = trace.map(({ terms: _terms, ...point }) => point);
  const history = new TextEncoder().encode(
    JSON.stringify({ terms, trace: points, sweeps, stopReason }),
  );
  return hashed(fit.theta, fit.phi, fit.themeWords, fit.unexplained, history);
}

function preparedWords(): ArrayBufferView[] {
  return goldenWords().flatMap(({ counts, occurrences, ...rest }) => [
    new TextEncoder().encode(JSON.stringify(rest)),
    counts.offsets,
    counts.indices,
    counts.counts,
    occurrences.offsets,
    occurrences.words,
  ]);
}

/** Our own functions, at arguments over their whole range. */
function functionValues(): Float64Array[] {
  const chance = createGenerator(8);
  const positive = Float64Array.from(
    { length: 4000 },
    (_, i) => (1 + chance.uniform()) * [1e-6, 1e-3, 0.1, 1, 10, 1e3, 1e6, 1e12][i % 8],
  );
  const exponents = positive.map((_, i) => (chance.uniform() - 0.5) * [1, 40, 1400][i % 3]);
  return [
    ...[digamma, trigamma, expDigamma, lgamma, log].map((f) => positive.map((x) => f(x))),
    exponents.map((x) => exp(x)),
  ];
}

function hashed(...parts: readonly ArrayBufferView[]): string {
  const size = parts.reduce((sum, { byteLength }) => sum + byteLength, 0);
  const all = new Uint8Array(size);
  let at = 0;
  for (const { buffer, byteOffset, byteLength } of parts) {
    all.set(new Uint8Array(buffer, byteOffset, byteLength), at);
    at += byteLength;
  }
  return sha256(all);
}
