import { exp, log } from '../numbers/index.ts';

export interface Interval {
  readonly low: number;
  readonly high: number;
}

/** The 97.5 % point of the standard normal distribution: what a 95 % interval reaches out by. */
const z = 1.959963984540054;

/**
 * The 95 % score interval of a share (Wilson 1927, Journal of the American Statistical Association
 * 22:209-212): the shares from which `count` of `of` is not further than 1.96 standard errors. Stays
 * within 0 and 1 and does not collapse at either end. `of` from 1, `count` from 0 to `of`.
 */
export function wilson(count: number, of: number): Interval {
  checkCounts('wilson', count, of, 1);
  const share = count / of;
  const squared = z * z;
  const scale = 1 + squared / of;
  const middle = (share + squared / (2 * of)) / scale;
  const reach = (z / scale) * Math.sqrt((share * (1 - share)) / of + squared / (4 * of * of));
  return {
    low: count === 0 ? 0 : Math.max(0, middle - reach),
    high: count === of ? 1 : Math.min(1, middle + reach),
  };
}

const oneSided = 0.05;

/**
 * The largest share that is not refuted (one-sided, 95 %) where `count` of `of` drawn at random were
 * found: the share at which so few would be found in 5 % of draws. Exact binomial (Clopper & Pearson
 * 1934, Biometrika 26:404-413); for none found 1 - .05^(1/of), about 3 / of (Hanley & Lippman-Hand
 * 1983, JAMA 249:1743-1745). Drawing without replacement only makes the true risk smaller. 1 where
 * nothing was drawn or all were found. To 1e-12.
 */
export function atMost(count: number, of: number): number {
  checkCounts('atMost', count, of, 0);
  if (count === of) return 1;
  let low = count / of;
  let high = 1;
  // Halving from 1 down to what f64 can tell apart near 1e-12.
  for (let step = 0; step < 50; step++) {
    const middle = (low + high) / 2;
    if (binomialUpTo(count, of, middle) > oneSided) low = middle;
    else high = middle;
  }
  return (low + high) / 2;
}

/** The probability of at most `count` of `of` at a share p in 0 < p < 1, summed in logarithms. */
function binomialUpTo(count: number, of: number, p: number): number {
  const odds = log(p) - log(1 - p);
  let term = of * log(1 - p);
  let most = term;
  const terms = [term];
  for (let i = 1; i <= count; i++) {
    term += odds + log((of - i + 1) / i);
    terms.push(term);
    if (term > most) most = term;
  }
  let sum = 0;
  for (const each of terms) sum += exp(each - most);
  return Math.min(1, sum * exp(most));
}

function checkCounts(caller: string, count: number, of: number, least: number): void {
  if (!(Number.isInteger(of) && of >= least)) {
    throw new Error(`${caller}: of is ${of}; must be a whole number from ${least}`);
  }
  if (!(Number.isInteger(count) && count >= 0 && count <= of)) {
    throw new Error(`${caller}: count is ${count}; must be a whole number from 0 to of = ${of}`);
  }
}
