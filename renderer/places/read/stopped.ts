import type { PassagePlace, ReadingListRequest, StoppedAt } from '../../../main/api.ts';

/** Transcripts and themes in the orders that a place is counted in. */
interface Orders {
  readonly transcripts: readonly { readonly id: string }[];
  readonly themes: readonly { readonly id: string }[];
}

const rankOf = (all: readonly { readonly id: string }[], id: string | null): number =>
  all.findIndex((one) => one.id === id);

/**
 * Where a reader is, in numbers: what was searched for stays in the study, so such a list is taken
 * up again as the whole study in order.
 */
export function stoppedAt(
  request: ReadingListRequest,
  { transcript, start }: Pick<PassagePlace, 'transcript' | 'start'>,
  { transcripts, themes }: Orders,
): StoppedAt {
  const { kind, unreadOnly, count, seed, theme, transcript: only } = request;
  return {
    kind: kind === 'keyword in context' ? 'in order' : kind,
    unreadOnly,
    count,
    seed,
    theme: rankOf(themes, theme),
    only: rankOf(transcripts, only),
    transcript: rankOf(transcripts, transcript),
    start,
  };
}

const needFit: readonly string[] = ['strongest first', 'nearest the edge', 'unexplained'];

/** The list and the place to take up again; no list where it cannot be had any more. */
export function takenUp(
  stopped: StoppedAt,
  { transcripts, themes }: Orders,
  { fitted, coldSample }: { readonly fitted: boolean; readonly coldSample: unknown },
): {
  readonly request: ReadingListRequest | null;
  readonly at: { readonly transcript: string; readonly start: number };
} {
  const { kind, unreadOnly, count, seed, start } = stopped;
  const theme = themes[stopped.theme]?.id ?? null;
  const possible =
    (fitted || !needFit.includes(kind)) &&
    ((kind !== 'one theme' && kind !== 'earlier wording') || theme !== null) &&
    (kind !== 'cold sample' || coldSample !== null);
  const transcript = transcripts[stopped.only]?.id ?? null;
  return {
    request: possible ? { kind, unreadOnly, count, seed, theme, transcript } : null,
    at: { transcript: transcripts[stopped.transcript]?.id ?? '', start },
  };
}
