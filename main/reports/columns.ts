/** A table as lines of text: every column but the last to the right. */
export function columns(
  head: readonly string[],
  rows: readonly (readonly string[])[],
): readonly string[] {
  const widths = head.map((_cell, i) => Math.max(...[head, ...rows].map((row) => row[i].length)));
  return [head, ...rows].map((row) =>
    row
      .map((cell, i) => (i === row.length - 1 ? cell : cell.padStart(widths[i])))
      .join('  ')
      .trimEnd(),
  );
}
