import { createGenerator } from '../../engine/numbers/index.ts';

/**
 * A draw without replacement, in parts that follow the transcripts' sizes (largest remainders), in a
 * random order. Each transcript is put into its random order before anything is left out of it, so
 * that a passage keeps its place in the draw while others are decided on.
 */
export function draw<One>(
  transcripts: readonly (readonly One[])[],
  count: number,
  seed: number,
  isWanted: (one: One) => boolean,
): One[] {
  const chance = Math.abs(Math.trunc(seed));
  const frames = transcripts.map((all, stream) =>
    createGenerator(chance, stream + 1)
      .shuffle([...all])
      .filter(isWanted),
  );
  const total = frames.reduce((sum, frame) => sum + frame.length, 0);
  const drawn = Math.min(count, total);
  const exact = frames.map((frame) => (total === 0 ? 0 : (drawn * frame.length) / total));
  const parts = exact.map(Math.floor);
  const left = drawn - parts.reduce((sum, part) => sum + part, 0);
  exact
    .map((share, index) => ({ index, rest: share - parts[index] }))
    .sort((a, b) => b.rest - a.rest || a.index - b.index)
    .slice(0, left)
    .forEach(({ index }) => parts[index]++);
  const chosen = frames.flatMap((frame, index) => frame.slice(0, parts[index]));
  return createGenerator(chance).shuffle(chosen);
}
