import { log } from './log.ts';

const halfLog2Pi = 0.91893853320467274178;

/**
 * The natural logarithm of the gamma function.
 *
 * Domain: x > 0 (Infinity at 0, NaN below). Method: log gamma(x) = log gamma(x + 8) - log of
 * x (x + 1) … (x + 7), then Stirling's series (Abramowitz & Stegun 1964, 6.1.41); within 0.25 of its
 * zeros at 1 and 2 the Taylor series (6.1.33), since the sum would cancel. Relative error below
 * 1e-13, exactly 0 at 1 and 2.
 */
export function lgamma(x: number): number {
  if (!(x > 0)) return x === 0 ? Infinity : NaN;
  if (x > 0.75 && x < 1.25) return aroundTwo(x - 1) - log(x);
  if (x > 1.75 && x < 2.25) return aroundTwo(x - 2);
  if (x >= 8) return stirling(x);
  const t = x * x + 7 * x;
  return stirling(x + 8) - log(t * (t + 6) * ((t + 10) * (t + 12)));
}

function stirling(z: number): number {
  const r = 1 / z;
  const q = r * r;
  const series =
    r *
    (1 / 12 -
      q *
        (1 / 360 -
          q * (1 / 1260 - q * (1 / 1680 - q * (1 / 1188 - q * (691 / 360360 - q * (1 / 156)))))));
  return (z - 0.5) * log(z) - z + halfLog2Pi + series;
}

/** 1 - Euler's constant, then (-1)^k (zeta(k) - 1) / k for k = 2 … 18 (mpmath 1.3, 50 digits). */
const taylor = [
  0.42278433509846714, 0.32246703342411322, -0.067352301053198095, 0.020580808427784548,
  -0.0073855510286739853, 0.0028905103307415233, -0.001192753911703261, 0.00050966952474304242,
  -0.00022315475845357938, 0.000099457512781808534, -0.000044926236738133142,
  0.000020507212775670692, -0.0000094394882752683959, 0.0000043748667899074878,
  -0.0000020392157538013662, 9.5514121304074198e-7, -4.492469198764566e-7, 2.1207184805554666e-7,
];

/** log gamma(2 + d) for |d| <= 0.25. */
function aroundTwo(d: number): number {
  let sum = 0;
  for (let k = taylor.length - 1; k >= 0; k--) sum = taylor[k] + d * sum;
  return d * sum;
}
