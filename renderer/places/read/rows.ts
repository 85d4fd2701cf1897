import type { PassageView, Role, TranscriptView } from '../../../main/api.ts';

/** A stretch of one turn: what one speaker says in one passage, or outside all of them. */
export interface Piece {
  readonly start: number;
  readonly end: number;
  readonly speaker: string | null;
  readonly role: Role;
  /** When its turn started; null where it does not open the turn, or no time is known. */
  readonly time: number | null;
  readonly opensTurn: boolean;
  /** Whether it is talk of the row's passage, and not another's words in between. */
  readonly own: boolean;
}

/** Pieces that stand together: a passage with the short turns inside it, or one turn outside. */
export interface Row {
  readonly key: string;
  readonly pieces: readonly Piece[];
  /** Index in the transcript's passages; -1 for talk that is no passage. */
  readonly passage: number;
  /** Whether the passage ends here: two passages can alternate, and each ends once. */
  readonly ends: boolean;
}

interface Segment {
  readonly start: number;
  readonly end: number;
  readonly passage: number;
}

/** A transcript from top to bottom. Every word of every turn lies in exactly one piece. */
export function rowsOf(view: Pick<TranscriptView, 'text' | 'turns' | 'passages'>): Row[] {
  const rows: Row[] = [];
  let open: { pieces: Piece[]; passage: number } | null = null;
  const close = (): void => {
    if (open === null) return;
    const { pieces, passage } = open;
    const end = pieces[pieces.length - 1]!.end;
    const ends = passage >= 0 && end >= view.passages[passage]!.end;
    rows.push({ key: `${pieces[0]!.start}`, pieces, passage, ends });
    open = null;
  };
  for (const { passage, ...piece } of piecesOf(view)) {
    const inside: boolean =
      open !== null &&
      (passage === open.passage
        ? passage >= 0
        : passage < 0 && open.passage >= 0 && piece.end <= view.passages[open.passage]!.end);
    if (!inside) close();
    open ??= { pieces: [], passage };
    open.pieces.push({ ...piece, own: passage === open.passage });
  }
  close();
  return rows;
}

function piecesOf({
  text,
  turns,
  passages,
}: Pick<TranscriptView, 'text' | 'turns' | 'passages'>): (Omit<Piece, 'own'> & {
  passage: number;
})[] {
  const segments = segmentsOf(passages);
  const pieces: (Omit<Piece, 'own'> & { passage: number })[] = [];
  let next = 0;
  for (const turn of turns) {
    const add = (from: number, to: number, passage: number): void => {
      // White space between two passages of a turn is the distance between their rows.
      const said = text.slice(from, Math.max(from, to));
      const start = from + said.length - said.trimStart().length;
      const end = from + said.trimEnd().length;
      if (start >= end) return;
      const opensTurn = pieces.length === 0 || pieces[pieces.length - 1]!.end <= turn.start;
      const { speaker, role } = turn;
      const time = opensTurn ? turn.time : null;
      pieces.push({ start, end, speaker, role, time, opensTurn, passage });
    };
    let at = turn.start;
    while (next < segments.length && segments[next]!.end <= turn.start) next++;
    for (let index = next; index < segments.length; index++) {
      const segment = segments[index]!;
      if (segment.start >= turn.end) break;
      const start = Math.max(segment.start, at);
      const end = Math.min(segment.end, turn.end);
      add(at, start, -1);
      add(start, end, segment.passage);
      at = Math.max(at, end);
    }
    add(at, turn.end, -1);
  }
  return pieces;
}

function segmentsOf(passages: readonly PassageView[]): Segment[] {
  return passages
    .flatMap(({ segments }, passage) => segments.map((segment) => ({ ...segment, passage })))
    .sort((a, b) => a.start - b.start || a.end - b.end);
}

/** Index of the row in which a passage begins, or -1. */
export function rowOfPassage(rows: readonly Row[], passage: number): number {
  return rows.findIndex((row) => row.passage === passage);
}

/** Index of the row that holds an offset, or -1. */
export function rowAt(rows: readonly Row[], offset: number): number {
  return rows.findIndex(({ pieces }) =>
    pieces.some(({ start, end }) => start <= offset && offset < end),
  );
}
