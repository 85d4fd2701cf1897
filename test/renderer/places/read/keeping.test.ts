import { describe, expect, it } from 'vitest';
import type { PassageView, ThemeRowView, TranscriptView } from '../../../../main/api.ts';
import {
  KeptTranscripts,
  newlyDecided,
  Positions,
} from '../../../../renderer/places/read/kept-transcripts.ts';
import { stoppedAt, takenUp } from '../../../../renderer/places/read/stopped.ts';
import { offersFor } from '../../../../renderer/places/read/theme-offers.ts';
import { WordSelection } from '../../../../renderer/places/read/word-selection.ts';

const passage = (start: number, none: boolean): PassageView => ({
  start,
  end: start + 5,
  number: 1,
  speaker: null,
  participant: 'P',
  time: null,
  segments: [],
  question: null,
  words: 1,
  countedWords: 1,
  suggestions: [],
  strongest: [],
  codings: [],
  heldBack: false,
  none: none ? { id: 'n', reader: 'R', at: '' } : null,
  memos: [],
});

const transcript = (id: string, passages: readonly PassageView[] = []): TranscriptView => ({
  id,
  name: id,
  text: '',
  details: [],
  turns: [],
  passages,
  words: 0,
  fieldNotes: [],
  memos: [],
});

describe('where a reader stopped', () => {
  const orders = {
    transcripts: [{ id: 'harbour' }, { id: 'mill' }],
    themes: [{ id: 'sea' }, { id: 'work' }],
  };
  const request = {
    kind: 'one theme',
    theme: 'work',
    transcript: null,
    unreadOnly: true,
    count: 60,
    seed: 7,
  } as const;
  const now = { fitted: true, coldSample: null };

  it('is found again, list and place', () => {
    const kept = stoppedAt(request, { transcript: 'mill', start: 812 }, orders);
    expect(takenUp(kept, orders, now)).toEqual({
      request,
      at: { transcript: 'mill', start: 812 },
    });
  });

  it('is kept without a word of the study', () => {
    const sought = { text: 'my sister', mode: 'phrase', within: 5, order: 'place' } as const;
    const kept = stoppedAt(
      { ...request, kind: 'keyword in context', search: sought },
      { transcript: 'mill', start: 812 },
      orders,
    );
    const { kind, unreadOnly, ...numbers } = kept;
    expect([kind, unreadOnly]).toEqual(['in order', true]);
    expect(Object.values(numbers).every(Number.isInteger)).toBe(true);
  });

  it('leaves the list out where it cannot be had any more', () => {
    const at = { transcript: 'mill', start: 0 };
    const gone = { ...orders, themes: [] };
    expect(takenUp(stoppedAt(request, at, orders), gone, now).request).toBeNull();
    const strong = stoppedAt({ ...request, kind: 'strongest first' }, at, orders);
    expect(takenUp(strong, orders, { ...now, fitted: false }).request).toBeNull();
    expect(takenUp(strong, orders, now).request).not.toBeNull();
    const cold = stoppedAt({ ...request, kind: 'cold sample' }, at, orders);
    expect(takenUp(cold, orders, now).request).toBeNull();
    expect(takenUp(cold, { transcripts: [], themes: [] }, now).at.transcript).toBe('');
  });
});

describe('kept transcripts', () => {
  it('let the oldest go, never the one on screen', () => {
    let kept = new KeptTranscripts();
    for (const id of ['a', 'b', 'c']) kept = kept.with(transcript(id), 2, 'a');
    expect(['a', 'b', 'c'].filter((id) => kept.get(id) !== null)).toEqual(['a', 'c']);
  });

  it('stay to be looked at when the study has changed, and are asked for again', () => {
    const kept = new KeptTranscripts().with(transcript('a'), 2, null).outdated();
    expect(kept.get('a')).not.toBeNull();
    expect(kept.isFresh('a')).toBe(false);
    expect(kept.with(transcript('a'), 2, null).isFresh('a')).toBe(true);
  });

  it('take one passage over without touching the others', () => {
    const other = passage(10, false);
    const kept = new KeptTranscripts().with(transcript('a', [passage(0, false), other]), 2, null);
    const passages = kept.withPassage('a', passage(0, true)).get('a')?.passages;
    expect(passages?.[0]?.none).not.toBeNull();
    expect(passages?.[1]).toBe(other);
  });

  it('count what was decided since, on the list alone and back again', () => {
    const positions = new Positions([{ transcript: 'a', start: 0, end: 5 }]);
    const before = [passage(0, false), passage(10, false)];
    const after = [passage(0, true), passage(10, true)];
    expect(newlyDecided(positions, 'a', before, after)).toBe(1);
    expect(newlyDecided(positions, 'a', after, before)).toBe(-1);
    expect(newlyDecided(positions, 'b', before, after)).toBe(0);
  });
});

describe('themes to choose from', () => {
  const theme = (id: string, label: string): ThemeRowView => ({
    id,
    name: label,
    label,
    code: '',
    heading: null,
    origin: 'fitted',
    pinned: false,
    setAside: false,
    modelled: true,
    share: null,
    words: [],
    confirmedPeople: 0,
    suggestedPeople: 0,
    codings: 0,
    suggestions: 0,
  });
  const themes = [theme('a', 'School week'), theme('b', 'The week'), theme('c', 'Weather')];

  it('begin with the strongest here and keep their places in the codebook', () => {
    const strongest = [{ theme: 'c', themeName: '', strength: 0.4, carriedBy: [], alike: null }];
    const offers = offersFor(themes, strongest, '');
    expect(offers.map((offer) => [offer.theme.id, offer.place])).toEqual([
      ['c', 3],
      ['a', 1],
      ['b', 2],
    ]);
  });

  it('are those that hold every typed word, names that begin with it first', () => {
    expect(offersFor(themes, [], 'we').map((offer) => offer.theme.id)).toEqual(['c', 'a', 'b']);
    expect(offersFor(themes, [], 'week sch').map((offer) => offer.theme.id)).toEqual(['a']);
    expect(offersFor(themes, [], 'boat')).toEqual([]);
  });
});

describe('selecting words by keys', () => {
  const text = 'No, it isn’t 👩‍👩‍👧 – café.';
  const start = WordSelection.in(text, [{ start: 0, end: text.length }])!;
  const shown = (selection: WordSelection): string =>
    text.slice(selection.span.start, selection.span.end);

  it('begins at the first word and leaves punctuation out', () => {
    expect(shown(start)).toBe('No');
    expect(shown(start.move(100, false))).toBe('café');
  });

  it('keeps where it began while it is extended, in both directions', () => {
    const second = start.move(1, false);
    expect(shown(second.move(1, true))).toBe('it isn’t');
    expect(shown(second.move(-1, true))).toBe('No, it');
  });

  it('is not possible where no word stands', () => {
    expect(WordSelection.in('… –', [{ start: 0, end: 3 }])).toBeNull();
  });
});
