import { describe, expect, test } from 'vitest';
import type { Api, PassagePlace, ReadingList } from '../../../main/api.ts';
import { oneEachFirst } from '../../../main/window/one-each-first.ts';
import { newStudy, passageOf, seen, transcriptsOf, type Table } from './table.ts';

const plain: Api['readingList']['takes'] = {
  kind: 'in order',
  theme: null,
  transcript: null,
  unreadOnly: false,
  count: 6,
  seed: 7,
};

function list(
  table: Table,
  request: Partial<Api['readingList']['takes']> = {},
): Promise<ReadingList> {
  return table.ask('readingList', { ...plain, ...request });
}

const key = ({ transcript, start }: PassagePlace): string => `${transcript} ${start}`;

describe('a reading list', () => {
  test('in order holds every passage by transcript and place', async () => {
    const table = await newStudy(2);
    const all = await list(table);
    const transcripts = await transcriptsOf(table);
    expect(all.name).toBe('in order');
    expect(all.places.map(key)).toEqual(
      ['P1', 'P2'].flatMap((name) => {
        const { id, passages } = transcripts.get(name)!;
        return passages.map(({ start }) => `${id} ${start}`);
      }),
    );
    const one = await list(table, { transcript: transcripts.get('P2')!.id });
    expect(one.name).toBe('in order, in P2');
    expect(one.places).toEqual(all.places.slice(-one.places.length));
  });

  test('by the model is refused before the first fit; order and draws are not', async () => {
    const table = await newStudy(2);
    for (const kind of ['strongest first', 'nearest the edge', 'unexplained'] as const) {
      expect(await table.refused('readingList', { ...plain, kind })).toBe('no fit');
    }
    expect((await list(table, { kind: 'random draw' })).places).toHaveLength(6);
    expect(await table.refused('readingList', { ...plain, theme: 'x' })).toBe('unknown theme');
    expect(await table.refused('readingList', { ...plain, kind: 'one theme' })).toBe(
      'unknown theme',
    );
    expect(await table.refused('readingList', { ...plain, transcript: 'x' })).toBe(
      'unknown transcript',
    );
  });

  test('by strength goes down, by the edge goes away from it', async () => {
    const table = await newStudy(4, { fitted: true });
    const strengths = async ({ places }: ReadingList): Promise<number[]> =>
      Promise.all(
        places.map(
          async (place) => (await table.ask('passageView', { place })).strongest[0].strength,
        ),
      );
    const strongest = await strengths(await list(table, { kind: 'strongest first' }));
    expect(strongest).toEqual([...strongest].sort((a, b) => b - a));
    const edge = (await strengths(await list(table, { kind: 'nearest the edge' }))).map((one) =>
      Math.abs(one - 0.5),
    );
    expect(edge).toEqual([...edge].sort((a, b) => a - b));
    expect(new Set((await list(table, { kind: 'unexplained' })).places.map(key)).size).toBe(
      strongest.length,
    );
  });

  test('of one theme holds what is suggested and what was decided on it, one a person first', async () => {
    const table = await newStudy(3, { fitted: true });
    const [{ id: theme, label }] = (await table.ask('shapeView', null)).themes;
    const first = await list(table, { kind: 'one theme', theme });
    expect(first.name).toBe(`one theme: ${label}`);
    expect(new Set(first.places.slice(0, 3).map(({ transcript }) => transcript)).size).toBe(3);
    const { place } = await passageOf(table, 'P1', 0);
    const elsewhere = first.places.map(key).includes(key(place))
      ? (await passageOf(table, 'P1', 1)).place
      : place;
    await table.ask('codeByHand', { place: elsewhere, theme, memo: '', ...seen });
    const then = await list(table, { kind: 'one theme', theme });
    expect(then.places).toHaveLength(first.places.length + 1);
    expect(then.decided).toBe(1);
  });
});

describe('a random draw', () => {
  test('is the same for the same seed and another for another, in parts by transcript', async () => {
    const table = await newStudy(4);
    const draw = await list(table, { kind: 'random draw', count: 8 });
    expect(draw.name).toBe('random draw of 8, seed 7');
    expect((await list(table, { kind: 'random draw', count: 8 })).places).toEqual(draw.places);
    const other = await list(table, { kind: 'random draw', count: 8, seed: 8 });
    expect(other.places).not.toEqual(draw.places);
    // Four transcripts of one size: two from each.
    const counts = new Map<string, number>();
    for (const { transcript } of draw.places) {
      counts.set(transcript, (counts.get(transcript) ?? 0) + 1);
    }
    expect([...counts.values()]).toEqual([2, 2, 2, 2]);
    expect((await list(table, { kind: 'random draw', count: 1000 })).places).toHaveLength(
      (await table.ask('overview', null))!.passages,
    );
    expect((await list(table, { kind: 'random draw', count: 0 })).places).toEqual([]);
  });

  test('of unread passages stays the same while it is gone through', async () => {
    const table = await newStudy(3);
    const request = { kind: 'random draw', count: 6, unreadOnly: true } as const;
    const draw = await list(table, request);
    expect(draw).toMatchObject({ name: 'random draw of 6, seed 7, unread', decided: 0 });
    for (const place of draw.places.slice(0, 3)) {
      await table.ask('markNone', { place, drawnBy: draw.name, seenSuggestion: false });
    }
    const then = await list(table, request);
    expect(then.places).toEqual(draw.places);
    expect(then.decided).toBe(3);
    // What is decided on in another way leaves the draw; the others keep their places in it.
    const [, , , fourth, ...rest] = draw.places;
    await table.ask('markNone', { place: fourth, drawnBy: 'in order', seenSuggestion: false });
    const left = (await list(table, request)).places.map(key);
    expect(left).not.toContain(key(fourth));
    expect(left).toEqual(expect.arrayContaining([...draw.places.slice(0, 3), ...rest].map(key)));
    // What was read on another list is not unread any more.
    const next = await list(table, { ...request, seed: 9 });
    const read = new Set(draw.places.slice(0, 3).map(key));
    expect(next.places.some((place) => read.has(key(place)))).toBe(false);
  });
});

describe('one of everybody before a second from anyone', () => {
  test('keeps the order within each round', () => {
    const given = ['a1', 'a2', 'b1', 'a3', 'c1', 'b2'];
    expect(oneEachFirst(given, ([who]) => who)).toEqual(['a1', 'b1', 'c1', 'a2', 'b2', 'a3']);
    expect(oneEachFirst([], String)).toEqual([]);
  });
});
