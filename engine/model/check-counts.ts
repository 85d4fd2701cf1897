import type { Counts } from './types.ts';

/** Throws where counts break their contract; `caller` is the public function that was given them. */
export function checkCounts(caller: string, counts: Counts): void {
  const { passages, words, offsets, indices } = counts;
  const fail = (argument: string, value: unknown, requirement: string): never => {
    throw new Error(`${caller}: ${argument} is ${String(value)}; must be ${requirement}`);
  };
  if (!(Number.isInteger(passages) && passages >= 0)) {
    fail('counts.passages', passages, 'a whole number from 0');
  }
  if (!(Number.isInteger(words) && words >= 0)) {
    fail('counts.words', words, 'a whole number from 0');
  }
  if (offsets.length !== passages + 1) {
    fail('counts.offsets.length', offsets.length, `passages + 1 = ${passages + 1}`);
  }
  if (indices.length !== counts.counts.length) {
    fail('counts.indices.length', indices.length, `counts.length = ${counts.counts.length}`);
  }
  if (offsets[0] !== 0 || offsets[passages] !== indices.length) {
    fail('counts.offsets', `${offsets[0]} … ${offsets[passages]}`, `0 … ${indices.length}`);
  }
  for (let d = 0; d < passages; d++) {
    if (offsets[d + 1] < offsets[d]) fail(`counts.offsets[${d + 1}]`, offsets[d + 1], 'ascending');
    for (let j = offsets[d]; j < offsets[d + 1]; j++) {
      if (indices[j] < 0 || indices[j] >= words) {
        fail(`counts.indices[${j}]`, indices[j], `from 0 to words - 1 = ${words - 1}`);
      }
      if (j > offsets[d] && indices[j] <= indices[j - 1]) {
        fail(`counts.indices[${j}]`, indices[j], 'ascending within a passage');
      }
      const count = counts.counts[j];
      if (!(count > 0 && count < Infinity)) {
        fail(`counts.counts[${j}]`, count, 'finite and above 0');
      }
    }
  }
}

/** Counted words of each passage. */
export function passageLengths(counts: Counts): Float64Array {
  const lengths = new Float64Array(counts.passages);
  for (let d = 0; d < counts.passages; d++) {
    for (let j = counts.offsets[d]; j < counts.offsets[d + 1]; j++) lengths[d] += counts.counts[j];
  }
  return lengths;
}

/** Occurrences of each word over all passages. */
export function wordTotals(counts: Counts): Float64Array {
  const totals = new Float64Array(counts.words);
  for (let j = 0; j < counts.indices.length; j++) totals[counts.indices[j]] += counts.counts[j];
  return totals;
}
