/** A run of text on a page, in points; `y` goes up the page. */
export interface PdfRun {
  readonly text: string;
  readonly x: number;
  readonly y: number;
  readonly width: number;
  readonly height: number;
}

export interface PdfPage {
  readonly width: number;
  readonly height: number;
  readonly runs: readonly PdfRun[];
}

/** What stands on pages: the text, a paragraph a line, and the footnotes beside it. */
export interface PdfText {
  readonly text: string;
  readonly footnotes: readonly string[];
}

interface PdfLine {
  /** Whether it begins with a number that stands small and raised, as footnotes do. */
  readonly numbered: boolean;
  /** Numbers that stand small and raised in the line: marks of footnotes, not part of its text. */
  readonly marks: readonly string[];
  readonly text: string;
  readonly left: number;
  readonly right: number;
  readonly y: number;
  readonly height: number;
}

/**
 * The text of pages of print: runs on one height are a line, lines of a paragraph are joined, and a
 * word that was divided at the end of a line is whole again. What stands at the edge of most pages
 * (running heads, page numbers) is left out. A paragraph ends where the next line stands further away
 * than usual, where it begins further in or out, or where the word that begins the next line would
 * still have had room.
 */
export function textOfPages(pages: readonly PdfPage[]): PdfText {
  const shown = withoutRunningHeads(pages.map((page) => ({ page, lines: linesOf(page) })));
  const usual = usualHeight(shown);
  const parts = shown.map((page) => withoutFootnotes(page, usual));
  const lines = parts.map(({ text }) => text);
  const whole = wordsOf(shown.flat());
  const footnotes = parts.flatMap(({ notes }) =>
    notes.map((note) =>
      note
        .map(({ text }) => text)
        .reduce((text, next) => join(text, next, whole))
        .replace(/^\d{1,3}[.)]?\s*/u, ''),
    ),
  );
  const paragraphs: string[] = [];
  const step = usualStep(lines);
  let before: PdfLine | null = null;
  for (const page of lines) {
    const right = rightEdge(page);
    const left = Math.min(...page.map((line) => line.left));
    page.forEach((line, index) => {
      const above = index === 0 ? before : page[index - 1]!;
      const joins =
        above !== null &&
        (index === 0 ? goesOnOverPage(above, line, right, left) : goesOn(above, line, right, step));
      const last = paragraphs.length - 1;
      if (joins && last >= 0) paragraphs[last] = join(paragraphs[last]!, line.text, whole);
      else paragraphs.push(line.text);
      before = line;
    });
  }
  return { text: paragraphs.join('\n'), footnotes };
}

/** Footnotes: lines in smaller type at the foot of a page, from the first that bears a mark on it. */
function withoutFootnotes(
  lines: readonly PdfLine[],
  usual: number,
): { readonly text: readonly PdfLine[]; readonly notes: readonly (readonly PdfLine[])[] } {
  const marks = new Set(lines.flatMap((line) => line.marks));
  const isSmall = ({ height }: PdfLine): boolean => height < 0.95 * usual;
  const bears = ({ text }: PdfLine): boolean =>
    marks.has(/^(\d{1,3})(?!\d)/u.exec(text)?.[1] ?? '');
  const from = lines.findIndex(
    (line, index) => bears(line) && (line.numbered || lines.slice(index).every(isSmall)),
  );
  if (from < 0) return { text: lines, notes: [] };
  const notes: PdfLine[][] = [];
  for (const line of lines.slice(from)) {
    if (bears(line)) notes.push([line]);
    else notes[notes.length - 1]!.push(line);
  }
  return { text: lines.slice(0, from), notes };
}

function usualHeight(pages: readonly (readonly PdfLine[])[]): number {
  const heights = pages.flatMap((lines) => lines.map(({ height }) => height));
  heights.sort((a, b) => a - b);
  return heights[heights.length >> 1] ?? 0;
}

function linesOf({ runs }: PdfPage): PdfLine[] {
  const shown = runs.filter(({ text }) => text.trim() !== '');
  const order = shown
    .map((run, index) => ({ run, index }))
    .sort((a, b) => b.run.y - a.run.y || a.run.x - b.run.x || a.index - b.index)
    .map(({ run }) => run);
  const rows: PdfRun[][] = [];
  for (const run of order) {
    const row = rows[rows.length - 1];
    // Raised and lowered characters stand on the line all the same.
    const within = row === undefined ? 0 : 0.5 * Math.max(row[0]!.height, run.height, 4);
    if (row !== undefined && row[0]!.y - run.y < within) row.push(run);
    else rows.push([run]);
  }
  return rows.map((row) => lineOf([...row].sort((a, b) => a.x - b.x)));
}

function lineOf(runs: readonly PdfRun[]): PdfLine {
  const tallest = Math.max(...runs.map(({ height }) => height));
  const ground = Math.min(...runs.map(({ y }) => y));
  const marks: string[] = [];
  let numbered = false;
  let text = '';
  let reached = runs[0]!.x;
  for (const run of runs) {
    const raised = run.height < 0.8 * tallest && run.y > ground + 0.12 * tallest;
    if (raised && text === '' && /^\d{1,3}$/u.test(run.text.trim())) numbered = true;
    if (raised && text !== '' && /^\d{1,3}$/u.test(run.text.trim())) {
      marks.push(run.text.trim());
      reached = Math.max(reached, run.x + run.width);
      continue;
    }
    const gap = run.x - reached;
    const em = Math.max(run.height, 4);
    if (text !== '' && !/\s$/u.test(text) && !/^\s/u.test(run.text)) {
      if (gap > 2.5 * em) text += '\t';
      else if (gap > 0.15 * em) text += ' ';
    }
    text += run.text;
    reached = Math.max(reached, run.x + run.width);
  }
  const heights = runs.map(({ height }) => height).sort((a, b) => a - b);
  return {
    text: text.replace(/ +/gu, ' ').trim(),
    marks,
    numbered,
    left: runs[0]!.x,
    right: reached,
    y: ground,
    height: heights[heights.length >> 1]!,
  };
}

/** Lines at the edge of a page that come back, but for their numbers, on half of the pages or more. */
function withoutRunningHeads(
  pages: readonly { readonly page: PdfPage; readonly lines: readonly PdfLine[] }[],
): PdfLine[][] {
  const edge = 3;
  const isAtEdge = (index: number, length: number): boolean =>
    index < edge || index >= length - edge;
  const keyOf = ({ text, y }: PdfLine): string =>
    `${text.replace(/\d+/gu, '#')}|${Math.round(y / 4)}`;
  const seen = new Map<string, number>();
  for (const { lines } of pages) {
    const keys = lines.filter((_, index) => isAtEdge(index, lines.length)).map(keyOf);
    for (const key of new Set(keys)) seen.set(key, (seen.get(key) ?? 0) + 1);
  }
  return pages.map(({ page, lines }) =>
    lines.filter((line, index) => {
      if (!isAtEdge(index, lines.length)) return true;
      const inMargin = line.y < 0.1 * page.height || line.y > 0.9 * page.height;
      const outermost = index === 0 || index === lines.length - 1;
      if (
        outermost &&
        /^(?:page\s+)?[-–—]?\s*\d{1,4}\s*[-–—]?(?:\s*(?:\/|of)\s*\d{1,4})?$/iu.test(line.text)
      ) {
        return false;
      }
      const times = seen.get(keyOf(line))!;
      return pages.length < 3 || times * 2 < pages.length || !inMargin;
    }),
  );
}

/** The distance from line to line that most lines have. */
function usualStep(pages: readonly (readonly PdfLine[])[]): number {
  const steps = pages.flatMap((lines) =>
    lines.slice(1).map((line, index) => lines[index]!.y - line.y),
  );
  if (steps.length === 0) return 0;
  const counts = new Map<number, number>();
  for (const step of steps) {
    const rounded = Math.round(step * 2) / 2;
    counts.set(rounded, (counts.get(rounded) ?? 0) + 1);
  }
  const most = Math.max(...counts.values());
  // Of the common distances the closest: lines of a paragraph, not paragraphs, stand closest.
  return Math.min(...[...counts].filter(([, count]) => count * 3 >= most).map(([step]) => step));
}

function rightEdge(lines: readonly PdfLine[]): number {
  const edges = lines.map(({ right }) => right).sort((a, b) => a - b);
  return edges[edges.length - 1] ?? 0;
}

function goesOn(above: PdfLine, line: PdfLine, right: number, step: number): boolean {
  const distance = above.y - line.y;
  if (distance > 1.35 * step) return false;
  // A line further in begins a paragraph; one further out goes on where the first was indented.
  if (line.left - above.left > 0.8 * line.height && !isDivided(above.text)) return false;
  return !hadRoom(above, line, right);
}

/** A paragraph goes on over the page where its last line is full and no sentence ended there. */
function goesOnOverPage(above: PdfLine, line: PdfLine, right: number, left: number): boolean {
  if (isDivided(above.text) && /^\p{Ll}/u.test(line.text)) return true;
  if (line.left - left > 0.8 * line.height) return false;
  return !hadRoom(above, line, right) && !/[.?!…:]["”’)\]]*$/u.test(above.text);
}

/** Whether the first word of a line would have fitted onto the one above. */
function hadRoom(above: PdfLine, line: PdfLine, right: number): boolean {
  const first = /^\S+/u.exec(line.text)?.[0] ?? '';
  const wide = ((line.right - line.left) / Math.max(1, line.text.length)) * (first.length + 1);
  return above.right + wide < right - 0.5 * line.height;
}

function isDivided(text: string): boolean {
  return /[\p{L}\p{M}](?:-|\u00ad|\u2010)$/u.test(text);
}

/** Words that stand whole in a line, hyphens of their own included. */
function wordsOf(lines: readonly PdfLine[]): ReadonlySet<string> {
  const words = new Set<string>();
  for (const { text } of lines) {
    // Neither end of a line counts: what stands there may be half a word.
    for (const [word] of text.matchAll(
      /(?<=[^\p{L}\p{M}-])[\p{L}\p{M}]+(?:[-\u2010][\p{L}\p{M}]+)*(?=[^\p{L}\p{M}-])/gu,
    )) {
      words.add(word.toLowerCase().replaceAll('\u2010', '-'));
    }
  }
  return words;
}

function join(text: string, next: string, whole: ReadonlySet<string>): string {
  if (!isDivided(text)) return `${text} ${next}`;
  const first = (/[\p{L}\p{M}]+(?=[-\u00ad\u2010]$)/u.exec(text)?.[0] ?? '').toLowerCase();
  const second = (/^[\p{L}\p{M}]+/u.exec(next)?.[0] ?? '').toLowerCase();
  if (second === '') return `${text} ${next}`;
  const joined = `${text.slice(0, -1)}${next}`;
  if (text.endsWith('\u00ad') || whole.has(`${first}${second}`)) return joined;
  // A capital behind it, the same word with its hyphen elsewhere, or two words: it has a hyphen.
  const own =
    /^\p{Lu}/u.test(next) ||
    whole.has(`${first}-${second}`) ||
    (whole.has(first) && whole.has(second));
  return own ? `${text}${next}` : joined;
}
