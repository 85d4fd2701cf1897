/** How often each label of one partition meets each label of another. */
export interface Contingency {
  readonly items: number;
  /** Sizes of the groups of the first partition, of the second, and of their meetings (no zeros). */
  readonly first: readonly number[];
  readonly second: readonly number[];
  readonly cells: readonly {
    readonly first: number;
    readonly second: number;
    readonly size: number;
  }[];
}

/** Labels are any whole numbers; groups and cells come in the order of their first item. */
export function contingency(a: ArrayLike<number>, b: ArrayLike<number>): Contingency {
  if (a.length !== b.length) {
    throw new Error(`contingency: the labels are ${a.length} and ${b.length}; must be as many`);
  }
  const groupsA = new Map<number, number>();
  const groupsB = new Map<number, number>();
  const first: number[] = [];
  const second: number[] = [];
  const meetings = new Map<string, { first: number; second: number; size: number }>();
  for (let i = 0; i < a.length; i++) {
    const groupA = groupOf(groupsA, first, a[i]);
    const groupB = groupOf(groupsB, second, b[i]);
    const key = `${groupA} ${groupB}`;
    const cell = meetings.get(key);
    if (cell) cell.size++;
    else meetings.set(key, { first: groupA, second: groupB, size: 1 });
  }
  return { items: a.length, first, second, cells: [...meetings.values()] };
}

function groupOf(groups: Map<number, number>, sizes: number[], label: number): number {
  const known = groups.get(label);
  if (known !== undefined) {
    sizes[known]++;
    return known;
  }
  groups.set(label, sizes.length);
  sizes.push(1);
  return sizes.length - 1;
}
