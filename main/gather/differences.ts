import type { Replacement } from '../../engine/spans/index.ts';

interface Block {
  readonly from: number;
  readonly to: number;
  readonly otherFrom: number;
  readonly otherTo: number;
}

/** Cells of the table that is filled to compare two lists; beyond it they differ as a whole. */
const mostCells = 4_000_000;

/**
 * What leads from one text to another: lines first, then the words in lines that differ, so that what
 * stands unchanged keeps its place. In order, apart, in UTF-16 code units.
 */
export function differences(before: string, after: string): Replacement[] {
  const lines = pieces(before, /[^\n]*\n|[^\n]+/gu);
  const others = pieces(after, /[^\n]*\n|[^\n]+/gu);
  const result: Replacement[] = [];
  for (const block of changedBlocks(lines.texts, others.texts)) {
    const start = lines.starts[block.from] ?? before.length;
    const end = lines.starts[block.to] ?? before.length;
    const otherStart = others.starts[block.otherFrom] ?? after.length;
    const otherEnd = others.starts[block.otherTo] ?? after.length;
    const words = pieces(before.slice(start, end), wordPattern);
    const otherWords = pieces(after.slice(otherStart, otherEnd), wordPattern);
    for (const inner of changedBlocks(words.texts, otherWords.texts)) {
      const from = start + (words.starts[inner.from] ?? end - start);
      const to = start + (words.starts[inner.to] ?? end - start);
      const length =
        (otherWords.starts[inner.otherTo] ?? otherEnd - otherStart) -
        (otherWords.starts[inner.otherFrom] ?? otherEnd - otherStart);
      const last = result[result.length - 1];
      if (last !== undefined && last.end === from) {
        result[result.length - 1] = {
          start: last.start,
          end: to,
          inserted: last.inserted + length,
        };
      } else result.push({ start: from, end: to, inserted: length });
    }
  }
  return result;
}

const wordPattern = /[\p{L}\p{M}\p{N}]+|\s+|[^\p{L}\p{M}\p{N}\s]/gu;

function pieces(text: string, pattern: RegExp): { texts: string[]; starts: number[] } {
  const texts: string[] = [];
  const starts: number[] = [];
  for (const match of text.matchAll(pattern)) {
    texts.push(match[0]);
    starts.push(match.index);
  }
  return { texts, starts };
}

/** Where two lists differ, by their longest common part (Wagner & Fischer 1974). */
function changedBlocks(a: readonly string[], b: readonly string[]): Block[] {
  let head = 0;
  while (head < a.length && head < b.length && a[head] === b[head]) head++;
  let tail = 0;
  const most = Math.min(a.length, b.length) - head;
  while (tail < most && a[a.length - 1 - tail] === b[b.length - 1 - tail]) tail++;
  const n = a.length - head - tail;
  const m = b.length - head - tail;
  if (n === 0 && m === 0) return [];
  if (n === 0 || m === 0 || (n + 1) * (m + 1) > mostCells) {
    return [{ from: head, to: head + n, otherFrom: head, otherTo: head + m }];
  }
  // common[i][j]: how long a common part the rests from i and from j have.
  const width = m + 1;
  const common = new Uint32Array((n + 1) * width);
  for (let i = n - 1; i >= 0; i--) {
    for (let j = m - 1; j >= 0; j--) {
      common[i * width + j] =
        a[head + i] === b[head + j]
          ? common[(i + 1) * width + j + 1]! + 1
          : Math.max(common[(i + 1) * width + j]!, common[i * width + j + 1]!);
    }
  }
  const blocks: Block[] = [];
  let i = 0;
  let j = 0;
  while (i < n || j < m) {
    if (i < n && j < m && a[head + i] === b[head + j]) {
      i++;
      j++;
      continue;
    }
    const from = i;
    const otherFrom = j;
    while ((i < n || j < m) && !(i < n && j < m && a[head + i] === b[head + j])) {
      const down = i < n ? common[(i + 1) * width + j]! : -1;
      const right = j < m ? common[i * width + j + 1]! : -1;
      if (down >= right) i++;
      else j++;
    }
    blocks.push({
      from: head + from,
      to: head + i,
      otherFrom: head + otherFrom,
      otherTo: head + j,
    });
  }
  return blocks;
}
