/** A count in the person's own way of writing numbers. */
export function number(count: number): string {
  return count.toLocaleString();
}

/** "1 person", "12 people": a count with its noun. */
export function counted(count: number, one: string, many = `${one}s`): string {
  return `${number(count)} ${count === 1 ? one : many}`;
}
