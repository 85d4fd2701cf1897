/**
 * The assignment of rows to columns that costs least in all (the Hungarian method: Kuhn 1955; with
 * potentials and shortest paths, O(n^2 m): Jonker & Volgenant 1987).
 *
 * `cost` has `rows` x `columns` finite values by rows. Returns a column for each row, each column at
 * most once; where there are more rows than columns, -1 for the rows that got none. Of several best
 * assignments it is always the same one.
 */
export function matching(cost: ArrayLike<number>, rows: number, columns: number): Int32Array {
  if (cost.length !== rows * columns) {
    throw new Error(`matching: cost.length is ${cost.length}; must be ${rows * columns}`);
  }
  for (let i = 0; i < cost.length; i++) {
    if (!(cost[i] > -Infinity && cost[i] < Infinity)) {
      throw new Error(`matching: cost[${i}] is ${cost[i]}; must be finite`);
    }
  }
  if (rows <= columns)
    return shortestPaths((row, column) => cost[row * columns + column], rows, columns);
  const rowOf = shortestPaths((column, row) => cost[row * columns + column], columns, rows);
  const columnOf = new Int32Array(rows).fill(-1);
  rowOf.forEach((row, column) => (columnOf[row] = column));
  return columnOf;
}

/** Takes rows <= columns. Places from 1 on; place 0 is the row about to be assigned. */
function shortestPaths(
  cost: (row: number, column: number) => number,
  rows: number,
  columns: number,
): Int32Array {
  const rowPotential = new Float64Array(rows + 1);
  const columnPotential = new Float64Array(columns + 1);
  const rowOf = new Int32Array(columns + 1);
  const before = new Int32Array(columns + 1);
  for (let row = 1; row <= rows; row++) {
    rowOf[0] = row;
    const slack = new Float64Array(columns + 1).fill(Infinity);
    const reached = new Uint8Array(columns + 1);
    let column = 0;
    do {
      reached[column] = 1;
      const from = rowOf[column];
      let step = Infinity;
      let next = 0;
      for (let to = 1; to <= columns; to++) {
        if (reached[to]) continue;
        const reduced = cost(from - 1, to - 1) - rowPotential[from] - columnPotential[to];
        if (reduced < slack[to]) {
          slack[to] = reduced;
          before[to] = column;
        }
        if (slack[to] < step) {
          step = slack[to];
          next = to;
        }
      }
      for (let to = 0; to <= columns; to++) {
        if (reached[to]) {
          rowPotential[rowOf[to]] += step;
          columnPotential[to] -= step;
        } else slack[to] -= step;
      }
      column = next;
    } while (rowOf[column] !== 0);
    // The path back to the new row is turned over: each column goes to the row before it.
    while (column !== 0) {
      rowOf[column] = rowOf[before[column]];
      column = before[column];
    }
  }
  const columnOf = new Int32Array(rows);
  for (let column = 1; column <= columns; column++) {
    if (rowOf[column] > 0) columnOf[rowOf[column] - 1] = column - 1;
  }
  return columnOf;
}
