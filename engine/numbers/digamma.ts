import { log } from './log.ts';

/** The zero of digamma in two parts; digamma of the first alone is -9.241265521729427e-17. */
const zero = 1.4616321449683622;
const zeroRest = 9.5499954299656977e-17;

/**
 * The digamma function: the derivative of log gamma.
 *
 * Domain: x > 0 (NaN elsewhere). Method: the recurrence psi(x) = psi(x + 8) - sum of 1 / (x + i)
 * with the sum as one fraction, then the asymptotic series (Abramowitz & Stegun 1964, 6.3.18);
 * within 0.1 of its zero the Taylor series there, since the sum would cancel. Relative error below
 * 1e-14 from 1e-8 up, at the zero too.
 */
export function digamma(x: number): number {
  if (!(x > 0)) return NaN;
  const d = x - zero - zeroRest;
  if (d > -0.1 && d < 0.1) return nearZero(d);
  if (x >= 8) return asymptotic(x);
  return asymptotic(x + 8) - reciprocalSum(x);
}

/**
 * The sum of 1 / (x + i) for i = 0 … 7, with one division: the factors are paired, x (x + 7) = t,
 * (x + 1)(x + 6) = t + 6, (x + 2)(x + 5) = t + 10, (x + 3)(x + 4) = t + 12.
 */
export function reciprocalSum(x: number): number {
  const t = x * x + 7 * x;
  const a = t * (t + 6);
  const b = (t + 10) * (t + 12);
  return ((x + x + 7) * ((t + t + 6) * b + (t + t + 22) * a)) / (a * b);
}

/** For z >= 8: log z - 1 / 2z - sum of B(2n) / (2n z^2n). */
function asymptotic(z: number): number {
  const r = 1 / z;
  const q = r * r;
  const series =
    q *
    (1 / 12 -
      q *
        (1 / 120 -
          q *
            (1 / 252 -
              q *
                (1 / 240 - q * (1 / 132 - q * (691 / 32760 - q * (1 / 12 - q * (3617 / 8160))))))));
  return log(z) - 0.5 * r - series;
}

/** Taylor coefficients at the zero: polygamma(n) / n!, n = 1 … 13 (mpmath 1.3, 50 digits). */
const taylor = [
  0.96767224544762117, -0.44276316898359211, 0.25849976095565101, -0.16394270544240653,
  0.10782405069126237, -0.072199561256454711, 0.048804288164143107, -0.033161126474847359,
  0.022597648232218105, -0.015424765904948959, 0.010538791616612175, -0.0072045343863568682,
  0.0049267813957298535,
];

function nearZero(d: number): number {
  let sum = 0;
  for (let n = taylor.length - 1; n >= 0; n--) sum = taylor[n] + d * sum;
  return d * sum;
}
