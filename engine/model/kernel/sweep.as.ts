/**
 * The SIMD twin of sweep.ts and expectation.ts, in AssemblyScript: the same operations in the same
 * order, four f32 or two f64 lanes at a time, so that results are equal bit for bit. What is computed
 * and why is said there; what follows only says it to the processor.
 *
 * Arguments are addresses in the imported memory, in the order of the fields of the state. Nothing
 * is allocated; AssemblyScript's own tables lie below 64 KiB, all arrays above.
 */

// ---- sweep.ts: rows of f32, a multiple of four lanes ----

function laneSum(lanes: v128): f32 {
  return (
    f32x4.extract_lane(lanes, 0) +
    f32x4.extract_lane(lanes, 1) +
    (f32x4.extract_lane(lanes, 2) + f32x4.extract_lane(lanes, 3))
  );
}

/** max(0, x). */
function positive(lanes: v128): v128 {
  return f32x4.pmax(f32x4.splat(0), lanes);
}

/** `roots`: 0 for exponent 1, else 1, 2, 3 for 1/2, 3/4, 7/8. */
function tempered(lanes: v128, roots: i32): v128 {
  const half = f32x4.sqrt(lanes);
  if (roots == 1) return half;
  const quarter = f32x4.sqrt(half);
  const threeQuarters = f32x4.mul(half, quarter);
  return roots == 2 ? threeQuarters : f32x4.mul(threeQuarters, f32x4.sqrt(quarter));
}

export function sweep(
  passages: i32,
  stride: i32,
  offsets: usize,
  indices: usize,
  counts: usize,
  responsibilities: usize,
  passageThemes: usize,
  wordThemes: usize,
  themeTotals: usize,
  alpha: usize,
  eta: usize,
  etaTotals: usize,
  moving: usize,
  normalisers: usize,
  scratch: usize,
  roots: i32,
): f64 {
  const row = (<usize>stride) << 2;
  let changed: f64 = 0;
  for (let d = 0; d < passages; d++) {
    const passage = passageThemes + <usize>d * row;
    const prior = alpha + <usize>d * row;
    const end = load<i32>(offsets + ((<usize>d) << 2), 4);
    for (let j = load<i32>(offsets + ((<usize>d) << 2)); j < end; j++) {
      const at = (<usize>j) << 2;
      const w = <usize>load<i32>(indices + at);
      const word = wordThemes + w * row;
      const wordPrior = eta + w * row;
      const entry = responsibilities + <usize>j * row;
      const count = load<f32>(counts + at);
      const one = f32x4.splat(count < 1 ? count : 1);

      let sums = f32x4.splat(0);
      for (let o: usize = 0; o < row; o += 16) {
        const self = f32x4.mul(one, v128.load(entry + o));
        const moved = f32x4.mul(self, v128.load(moving + o));
        const a = f32x4.add(
          positive(f32x4.sub(v128.load(passage + o), self)),
          v128.load(prior + o),
        );
        const b = f32x4.add(
          positive(f32x4.sub(v128.load(word + o), moved)),
          v128.load(wordPrior + o),
        );
        const c = f32x4.add(
          positive(f32x4.sub(v128.load(themeTotals + o), moved)),
          v128.load(etaTotals + o),
        );
        let weight = f32x4.div(f32x4.mul(a, b), c);
        if (roots != 0) weight = tempered(weight, roots);
        v128.store(scratch + o, weight);
        sums = f32x4.add(sums, weight);
      }
      const total = laneSum(sums);
      store<f32>(normalisers + at, total);
      const scale = f32x4.splat(total > 0 ? <f32>1 / total : 0);

      const times = f32x4.splat(count);
      sums = f32x4.splat(0);
      for (let o: usize = 0; o < row; o += 16) {
        const share = f32x4.mul(v128.load(scratch + o), scale);
        const change = f32x4.mul(times, f32x4.sub(share, v128.load(entry + o)));
        const moved = f32x4.mul(change, v128.load(moving + o));
        v128.store(entry + o, share);
        v128.store(passage + o, f32x4.add(v128.load(passage + o), change));
        v128.store(word + o, f32x4.add(v128.load(word + o), moved));
        v128.store(themeTotals + o, f32x4.add(v128.load(themeTotals + o), moved));
        sums = f32x4.add(sums, f32x4.abs(change));
      }
      changed += <f64>laneSum(sums);
    }
  }
  return changed;
}

export function assign(
  passages: i32,
  stride: i32,
  offsets: usize,
  indices: usize,
  responsibilities: usize,
  wordThemes: usize,
  alpha: usize,
  scratch: usize,
): void {
  const row = (<usize>stride) << 2;
  for (let d = 0; d < passages; d++) {
    const prior = alpha + <usize>d * row;
    const end = load<i32>(offsets + ((<usize>d) << 2), 4);
    for (let j = load<i32>(offsets + ((<usize>d) << 2)); j < end; j++) {
      const word = wordThemes + <usize>load<i32>(indices + ((<usize>j) << 2)) * row;
      const entry = responsibilities + <usize>j * row;
      let sums = f32x4.splat(0);
      for (let o: usize = 0; o < row; o += 16) {
        const weight = f32x4.mul(v128.load(prior + o), v128.load(word + o));
        v128.store(scratch + o, weight);
        sums = f32x4.add(sums, weight);
      }
      const total = laneSum(sums);
      const scale = f32x4.splat(total > 0 ? <f32>1 / total : 0);
      for (let o: usize = 0; o < row; o += 16) {
        v128.store(entry + o, f32x4.mul(v128.load(scratch + o), scale));
      }
    }
  }
}

export function recount(
  passages: i32,
  words: i32,
  stride: i32,
  offsets: usize,
  indices: usize,
  counts: usize,
  responsibilities: usize,
  passageThemes: usize,
  wordThemes: usize,
  themeTotals: usize,
  moving: usize,
): void {
  const row = (<usize>stride) << 2;
  memory.fill(passageThemes, 0, <usize>passages * row);
  for (let o: usize = 0; o < row; o += 16) {
    const still = f32x4.sub(f32x4.splat(1), v128.load(moving + o));
    for (let w = 0; w < words; w++) {
      const at = wordThemes + <usize>w * row + o;
      v128.store(at, f32x4.mul(v128.load(at), still));
    }
    v128.store(themeTotals + o, f32x4.mul(v128.load(themeTotals + o), still));
  }
  for (let d = 0; d < passages; d++) {
    const passage = passageThemes + <usize>d * row;
    const end = load<i32>(offsets + ((<usize>d) << 2), 4);
    for (let j = load<i32>(offsets + ((<usize>d) << 2)); j < end; j++) {
      const word = wordThemes + <usize>load<i32>(indices + ((<usize>j) << 2)) * row;
      const entry = responsibilities + <usize>j * row;
      const count = f32x4.splat(load<f32>(counts + ((<usize>j) << 2)));
      for (let o: usize = 0; o < row; o += 16) {
        const expected = f32x4.mul(count, v128.load(entry + o));
        v128.store(passage + o, f32x4.add(v128.load(passage + o), expected));
        const moved = f32x4.mul(expected, v128.load(moving + o));
        v128.store(word + o, f32x4.add(v128.load(word + o), moved));
      }
    }
  }
  for (let w = 0; w < words; w++) {
    const word = wordThemes + <usize>w * row;
    for (let o: usize = 0; o < row; o += 16) {
      const moved = f32x4.mul(v128.load(word + o), v128.load(moving + o));
      v128.store(themeTotals + o, f32x4.add(v128.load(themeTotals + o), moved));
    }
  }
}

// ---- expectation.ts: rows of f64, a multiple of two lanes ----

function horner(p: v128, r: v128, coefficient: f64): v128 {
  return f64x2.add(f64x2.splat(coefficient), f64x2.mul(r, p));
}

/** numbers/exp-digamma.ts, with numbers/digamma.ts' reciprocalSum in it. */
function expDigamma(x: v128): v128 {
  const t = f64x2.add(f64x2.mul(x, x), f64x2.mul(f64x2.splat(7), x));
  const t6 = f64x2.add(t, f64x2.splat(6));
  const a = f64x2.mul(t, t6);
  const b = f64x2.mul(f64x2.add(t, f64x2.splat(10)), f64x2.add(t, f64x2.splat(12)));
  const tt = f64x2.add(t, t);
  const numerator = f64x2.mul(
    f64x2.add(f64x2.add(x, x), f64x2.splat(7)),
    f64x2.add(
      f64x2.mul(f64x2.add(tt, f64x2.splat(6)), b),
      f64x2.mul(f64x2.add(tt, f64x2.splat(22)), a),
    ),
  );
  const sum = f64x2.pmin(f64x2.splat(700), f64x2.div(numerator, f64x2.mul(a, b)));

  const y = f64x2.add(x, f64x2.splat(7.5));
  const q = f64x2.div(f64x2.splat(1), f64x2.mul(y, y));
  let f = f64x2.splat(47655701498228027.0 / 578473294823424000.0);
  f = horner(f, q, -499769010050743.0 / 24103053950976000.0);
  f = horner(f, q, 2709398569.0 / 367873228800.0);
  f = horner(f, q, -5509121.0 / 1393459200.0);
  f = horner(f, q, 10313.0 / 2903040.0);
  f = horner(f, q, -37.0 / 5760.0);
  f = horner(f, q, 1.0 / 24.0);
  const factor = f64x2.mul(y, horner(f, q, 1));

  const n = f64x2.floor(
    f64x2.sub(f64x2.splat(0.5), f64x2.mul(sum, f64x2.splat(1.4426950408889634))),
  );
  const r = f64x2.sub(
    f64x2.sub(f64x2.neg(sum), f64x2.mul(n, f64x2.splat(6.9314718036912381649e-1))),
    f64x2.mul(n, f64x2.splat(1.90821492927058770002e-10)),
  );
  let p = f64x2.splat(1.0 / 479001600.0);
  p = horner(p, r, 1.0 / 39916800.0);
  p = horner(p, r, 1.0 / 3628800.0);
  p = horner(p, r, 1.0 / 362880.0);
  p = horner(p, r, 1.0 / 40320.0);
  p = horner(p, r, 1.0 / 5040.0);
  p = horner(p, r, 1.0 / 720.0);
  p = horner(p, r, 1.0 / 120.0);
  p = horner(p, r, 1.0 / 24.0);
  p = horner(p, r, 1.0 / 6.0);
  p = horner(p, r, 1.0 / 2.0);
  p = horner(p, r, 1);
  p = horner(p, r, 1);
  // Adding 1.5 x 2^52 leaves n in the lowest bits; moved up, it adds to the exponent of p.
  const exponent = i64x2.shl(f64x2.add(n, f64x2.splat(6755399441055744.0)), 52);
  return f64x2.mul(factor, i64x2.add(p, exponent));
}

function pairSum(lanes: v128): f64 {
  return f64x2.extract_lane(lanes, 0) + f64x2.extract_lane(lanes, 1);
}

function open(alpha: usize): v128 {
  return f64x2.gt(v128.load(alpha), f64x2.splat(0));
}

export function expectation(
  passages: i32,
  words: i32,
  themes: i32,
  stride: i32,
  offsets: usize,
  indices: usize,
  counts: usize,
  alpha: usize,
  gamma: usize,
  expected: usize,
  statistics: usize,
  scratch: usize,
  limit: i32,
  tolerance: f64,
  flat: i32,
): f64 {
  const row = (<usize>stride) << 3;
  const sums = scratch + row;
  let steps: f64 = 0;
  memory.fill(statistics, 0, <usize>words * row);
  for (let d = 0; d < passages; d++) {
    const passage = gamma + <usize>d * row;
    const prior = alpha + <usize>d * row;
    const begin = load<i32>(offsets + ((<usize>d) << 2));
    const end = load<i32>(offsets + ((<usize>d) << 2), 4);
    for (let o: usize = 0; o < row; o += 16) {
      if (flat) v128.store(passage + o, v128.and(f64x2.splat(1), open(prior + o)));
      v128.store(scratch + o, v128.and(expDigamma(v128.load(passage + o)), open(prior + o)));
    }
    for (let step = 0; step < limit; step++) {
      for (let o: usize = 0; o < row; o += 16) v128.store(sums + o, f64x2.splat(0));
      for (let j = begin; j < end; j++) {
        const word = expected + <usize>load<i32>(indices + ((<usize>j) << 2)) * row;
        const ratio = f64x2.splat(
          load<f64>(counts + ((<usize>j) << 3)) / mixture(scratch, word, row),
        );
        for (let o: usize = 0; o < row; o += 16) {
          v128.store(
            sums + o,
            f64x2.add(v128.load(sums + o), f64x2.mul(ratio, v128.load(word + o))),
          );
        }
      }
      let change = f64x2.splat(0);
      for (let o: usize = 0; o < row; o += 16) {
        const next = f64x2.add(
          v128.load(prior + o),
          f64x2.mul(v128.load(scratch + o), v128.load(sums + o)),
        );
        change = f64x2.add(change, f64x2.abs(f64x2.sub(next, v128.load(passage + o))));
        v128.store(passage + o, next);
        v128.store(scratch + o, v128.and(expDigamma(next), open(prior + o)));
      }
      steps += 1;
      if (pairSum(change) < tolerance * <f64>themes) break;
    }
    for (let j = begin; j < end; j++) {
      const w = <usize>load<i32>(indices + ((<usize>j) << 2)) * row;
      const ratio = f64x2.splat(
        load<f64>(counts + ((<usize>j) << 3)) / mixture(scratch, expected + w, row),
      );
      for (let o: usize = 0; o < row; o += 16) {
        const at = statistics + w + o;
        v128.store(at, f64x2.add(v128.load(at), f64x2.mul(ratio, v128.load(scratch + o))));
      }
    }
  }
  return steps;
}

function mixture(t: usize, word: usize, row: usize): f64 {
  let total = f64x2.splat(0);
  for (let o: usize = 0; o < row; o += 16) {
    total = f64x2.add(total, f64x2.mul(v128.load(t + o), v128.load(word + o)));
  }
  return pairSum(total) + 1e-300;
}
