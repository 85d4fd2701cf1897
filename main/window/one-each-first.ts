/** In the given order, but a first one of everybody before a second from anyone. */
export function oneEachFirst<One>(all: readonly One[], whose: (one: One) => string): One[] {
  const rounds: One[][] = [];
  const seen = new Map<string, number>();
  for (const one of all) {
    const round = seen.get(whose(one)) ?? 0;
    seen.set(whose(one), round + 1);
    (rounds[round] ??= []).push(one);
  }
  return rounds.flat();
}
