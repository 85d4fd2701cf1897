import { beforeEach, describe, expect, test } from 'vitest';
import type { Api, PassagePlace } from '../../../main/api.ts';
import { file, newStudy, passageOf, placeOf, seen, transcriptsOf, type Table } from './table.ts';

/** A request to code a place. */
function code(place: PassagePlace, theme: string, memo = ''): Api['confirm']['takes'] {
  return { place, theme, memo, ...seen };
}

describe('deciding on a passage', () => {
  let table: Table;
  let place: PassagePlace;
  /** A theme that the model suggests for the passage, and one that it does not see in it. */
  let suggested: string;
  let other: string;

  beforeEach(async () => {
    table = await newStudy(3, { fitted: true });
    const first = await passageOf(table);
    place = first.place;
    suggested = first.view.suggestions[0].theme;
    ({ theme: other } = await table.ask('addTheme', { name: 'Shame', byHand: true, seeds: [] }));
  });

  const view = () => table.ask('passageView', { place });
  const revision = async () => (await table.ask('overview', null))!.revision;

  test('a suggestion shows its strength and the words that carry it', async () => {
    const { suggestions, countedWords, strongest } = await view();
    const { text } = (await transcriptsOf(table)).get('P1')!;
    expect(suggestions).toHaveLength(1);
    expect(suggestions[0].strength).toBeGreaterThanOrEqual(0.5);
    expect(strongest[0]).toEqual(suggestions[0]);
    const said = suggestions[0].carriedBy.map(({ start, end }) => text.slice(start, end));
    expect(said.length).toBeGreaterThan(0);
    expect(said.length).toBeLessThanOrEqual(Math.min(8, countedWords));
    const themes = await table.ask('themeView', { theme: suggested });
    const words = new Set(themes.words.map(({ surface }) => surface));
    for (const word of said) expect(words).toContain(word.toLowerCase());
  });

  test('confirming what is suggested stores its strength and how it came about', async () => {
    const { strength } = (await view()).suggestions[0];
    const overview = await table.ask('confirm', code(place, suggested, 'Look'));
    expect(overview.unread).toBe(overview.passages - 1);
    const after = await view();
    expect(after.suggestions).toEqual([]);
    expect(after.codings).toMatchObject([
      {
        span: { start: place.start, end: place.end },
        theme: suggested,
        standing: 'confirmed',
        memo: 'Look',
        reader: 'Ada',
      },
    ]);
    expect(after.codings[0].strengthAtDecision).toBeCloseTo(strength, 6);
  });

  test('a theme that the model does not see there is coded by hand', async () => {
    await table.ask('confirm', code(place, other));
    expect((await view()).codings).toMatchObject([
      { theme: other, standing: 'by hand', strengthAtDecision: null },
    ]);
    // The suggestion of another theme still waits.
    expect((await view()).suggestions).toHaveLength(1);
  });

  test('confirming and rejecting twice is one decision; a new memo is taken over', async () => {
    await table.ask('confirm', code(place, suggested));
    const confirmed = await revision();
    await table.ask('confirm', code(place, suggested));
    expect(await revision()).toBe(confirmed);
    await table.ask('confirm', code(place, suggested, 'And so'));
    expect((await view()).codings).toMatchObject([{ standing: 'confirmed', memo: 'And so' }]);
    await table.ask('reject', code(place, suggested));
    const rejected = await revision();
    await table.ask('reject', code(place, suggested));
    expect(await revision()).toBe(rejected);
    expect((await view()).codings).toMatchObject([{ standing: 'rejected' }]);
    // The rejection took the confirmation's place in one decision.
    await table.ask('undo', null);
    expect((await view()).codings).toMatchObject([{ standing: 'confirmed', memo: 'And so' }]);
  });

  test('rejecting does not put the next theme forward', async () => {
    await table.ask('reject', code(place, suggested));
    const after = await view();
    expect(after.suggestions).toEqual([]);
    expect(after.strongest[0].theme).toBe(suggested);
  });

  test('"no theme applies" goes with a coding that comes, and is refused where one is', async () => {
    await table.ask('markNone', { place, ...seen });
    const marked = await revision();
    await table.ask('markNone', { place, ...seen });
    expect(await revision()).toBe(marked);
    expect(await view()).toMatchObject({ suggestions: [], none: { reader: 'Ada' } });
    await table.ask('confirm', code(place, suggested));
    expect((await view()).none).toBeNull();
    expect(await table.refused('markNone', { place, ...seen })).toBe('codings there');
    await table.ask('undo', null);
    expect(await view()).toMatchObject({ none: { reader: 'Ada' }, codings: [] });
    // A rejection says nothing against it.
    await table.ask('reject', code(place, suggested));
    expect((await view()).none).not.toBeNull();
  });

  test('a passage that is partly coded with a theme cannot be said to lack it', async () => {
    const part = { ...place, end: place.start + 20 };
    await table.ask('codeByHand', code(part, suggested));
    expect(await table.refused('reject', code(place, suggested))).toBe('part coded');
    const { codings, suggestions } = await view();
    expect(suggestions).toEqual([]);
    await table.ask('removeCoding', { transcript: place.transcript, coding: codings[0].id });
    await table.ask('reject', code(place, suggested));
    // Finding it in a part after all takes the rejection away.
    await table.ask('codeByHand', code(part, suggested));
    expect((await view()).codings).toMatchObject([{ standing: 'by hand' }]);
  });

  test('a confirmation of one reader is not taken away by another', async () => {
    await table.ask('confirm', code(place, suggested));
    await table.ask('nameReader', { name: 'Bo' });
    await table.ask('reject', code(place, suggested));
    expect((await view()).codings.map(({ reader, standing }) => [reader, standing])).toEqual([
      ['Ada', 'confirmed'],
      ['Bo', 'rejected'],
    ]);
  });

  test('a merge takes codings and suggestions along', async () => {
    const { themes } = await table.ask('shapeView', null);
    const next = themes.find(({ id, modelled }) => modelled && id !== suggested)!;
    await table.ask('confirm', code(place, suggested));
    await table.ask('mergeThemes', { into: next.id, from: [suggested] });
    expect((await view()).codings).toMatchObject([{ theme: next.id }]);
    const merged = await table.ask('themeView', { theme: next.id });
    expect(merged.row.share).toBeCloseTo(1, 5);
    // Deciding under the old id, as another window might, decides on the theme that is left.
    const before = await revision();
    await table.ask('confirm', code(place, suggested));
    expect(await revision()).toBe(before);
    expect(await table.refused('themeView', { theme: suggested })).toBe('merged theme');
  });

  test('what cannot be decided is refused in sentences', async () => {
    const off = { ...place, start: place.start + 1 };
    const far = { ...place, start: 0, end: 1_000_000 };
    const gone = { ...place, transcript: 'x' };
    expect(await table.refused('passageView', { place: off })).toBe('place changed');
    expect(await table.refused('passageView', { place: gone })).toBe('unknown transcript');
    expect(await table.refused('confirm', code(off, suggested))).toBe('place changed');
    expect(await table.refused('confirm', code(place, 'x'))).toBe('unknown theme');
    expect(await table.refused('reject', code(gone, suggested))).toBe('unknown transcript');
    expect(await table.refused('codeByHand', code(far, suggested))).toBe('outside the text');
    expect(await table.refused('codeByHand', code(gone, suggested))).toBe('unknown transcript');
    expect(await table.refused('codeByHand', code(place, 'x'))).toBe('unknown theme');
    expect(await table.refused('markNone', { place: off, ...seen })).toBe('place changed');
    const { transcript } = place;
    expect(await table.refused('removeCoding', { transcript, coding: 'x' })).toBe('unknown coding');
    expect(await table.refused('clearNone', { transcript, none: 'x' })).toBe('unknown coding');
    expect(await table.refused('reviseMemo', { memo: 'x', text: 'a' })).toBe('unknown memo');
  });

  test('memos may be long, but not longer than a million characters, and not empty', async () => {
    const long = 'é'.repeat(1_000_000);
    await table.ask('writeMemo', { on: { kind: 'theme', theme: other }, text: long });
    const { memos } = await table.ask('themeView', { theme: other });
    expect(memos[0].text).toBe(long);
    const tooLong = `${long}!`;
    expect(await table.refused('reviseMemo', { memo: memos[0].id, text: tooLong })).toBe(
      'too long',
    );
    expect(await table.refused('writeMemo', { on: { kind: 'study' }, text: tooLong })).toBe(
      'too long',
    );
    expect(await table.refused('confirm', code(place, suggested, tooLong))).toBe('too long');
    expect(await table.refused('writeMemo', { on: { kind: 'study' }, text: ' \n' })).toBe(
      'empty memo',
    );
    const unknown = { kind: 'theme', theme: 'x' } as const;
    expect(await table.refused('writeMemo', { on: unknown, text: 'a' })).toBe('unknown theme');
    const off = { kind: 'passage', place: { ...place, end: place.end - 1 } } as const;
    expect(await table.refused('writeMemo', { on: off, text: 'a' })).toBe('place changed');
    const lost = { kind: 'coding', transcript: place.transcript, coding: 'x' } as const;
    expect(await table.refused('writeMemo', { on: lost, text: 'a' })).toBe('unknown coding');
  });
});

describe('coding a stretch by hand', () => {
  const talk = [
    'Interviewer: How was it, all in all?',
    'P1: We waited at the pier. 👩‍👩‍👧 It rained; the cafe\u0301 was shut.',
    'Interviewer: Mm-hm.',
    'P1: And then the boat came after all.',
    'P2: It came at nine.',
    '',
  ].join('\n');

  async function marked(from: string, to: string = from, edges = [0, 0]) {
    const table = await newStudy(0);
    await table.ask('addTranscripts', { files: [file('t.txt', talk)] });
    const { theme } = await table.ask('addTheme', { name: 'Waiting', byHand: true, seeds: [] });
    const { id, text } = (await transcriptsOf(table)).get('t')!;
    const start = text.indexOf(from) + edges[0];
    const end = text.indexOf(to) + to.length + edges[1];
    const request = code({ transcript: id, start, end }, theme);
    const answer = await table.answer('codeByHand', request);
    if ('refused' in answer) return answer.code;
    const { passages } = (await transcriptsOf(table)).get('t')!;
    const { span } = passages.flatMap(({ codings }) => codings)[0];
    return text.slice(span.start, span.end);
  }

  test('keeps the words and leaves the white space at the edges', async () => {
    expect(await marked(' at the pier. ')).toBe('at the pier.');
  });

  test('widens to whole characters: emoji that are joined, letters with marks', async () => {
    expect(await marked('👩‍👩‍👧', '👩‍👩‍👧', [1, -1])).toBe('👩‍👩‍👧');
    expect(await marked('the cafe\u0301', 'the cafe\u0301', [0, -1])).toBe('the cafe\u0301');
    expect(await marked('\u0301 was')).toBe('e\u0301 was');
  });

  test('may run over a short word of the interviewer within one passage', async () => {
    expect(await marked('the cafe\u0301', 'And then')).toContain('Mm-hm');
  });

  test('is refused over several people, in the interviewer’s words, and without a word', async () => {
    expect(await marked('after all', 'It came')).toBe('several speakers');
    expect(await marked('How was')).toBe('no participant speaks');
    expect(await marked('all in all?', 'We waited')).toBe('several speakers');
    // From behind to before: the selection was made backwards.
    expect(await marked(' It rained', ' ')).toBe('nothing selected');
    expect(await marked(' It rained', ' It rained', [0, -10])).toBe('nothing selected');
  });

  test('the same stretch and theme a second time is no second coding', async () => {
    const table = await newStudy(1);
    const { place } = await passageOf(table);
    const { theme } = await table.ask('addTheme', { name: 'Waiting', byHand: true, seeds: [] });
    const part = { ...place, end: place.start + 12 };
    const once = await table.ask('codeByHand', code(part, theme));
    expect((await table.ask('codeByHand', code(part, theme))).revision).toBe(once.revision);
    const wider = await table.ask('codeByHand', code({ ...part, end: part.end + 6 }, theme));
    expect(wider.revision).toBeGreaterThan(once.revision);
    expect((await passageOf(table)).view.codings).toHaveLength(2);
  });
});

describe('reading before and after the settings change', () => {
  test('before the first fit there are passages, and nothing is suggested', async () => {
    const table = await newStudy(1);
    const { view, place } = await passageOf(table);
    expect(view).toMatchObject({ suggestions: [], strongest: [], number: 1, speaker: 'P1' });
    const { passages } = [...(await transcriptsOf(table)).values()][0];
    for (const passage of passages) {
      await table.ask('markNone', { place: placeOf(place.transcript, passage), ...seen });
    }
    expect(await table.ask('overview', null)).toMatchObject({ unread: 0, transcriptsRead: 1 });
  });

  test('passages that are the same as in the fit keep their suggestions; others have none', async () => {
    const table = await newStudy(3, { fitted: true });
    const before = await passageOf(table);
    expect(before.view.suggestions).toHaveLength(1);
    const [, , third] = (await table.ask('gatherView', null)).transcripts;
    await table.ask('assignSpeaker', {
      transcript: third.id,
      label: 'P3',
      role: 'participant',
      participant: 'Ann',
      everywhere: false,
    });
    expect(await table.ask('overview', null)).toMatchObject({
      stale: true,
      waiting: ['1 transcript with other speakers'],
    });
    expect((await passageOf(table)).view).toEqual(before.view);
    expect((await passageOf(table, 'P3')).view).toMatchObject({ participant: 'Ann' });
    await table.ask('changeSettings', { settings: { 'text.passageMaximumWords': 30 } });
    const after = await passageOf(table);
    expect(after.view.end).toBeLessThan(before.view.end);
    expect(after.view.suggestions).toEqual([]);
    await table.ask('undo', null);
    await table.ask('undo', null);
    expect(await table.ask('overview', null)).toMatchObject({ stale: false, waiting: [] });
    expect((await passageOf(table)).view).toEqual(before.view);
  });

  test('a transcript that was removed and brought back is the one of the fit', async () => {
    const table = await newStudy(3, { fitted: true });
    const before = await passageOf(table);
    await table.ask('removeTranscript', { transcript: before.place.transcript });
    expect(await table.ask('overview', null)).toMatchObject({
      stale: true,
      waiting: ['1 transcript removed'],
    });
    expect((await table.ask('strata', null)).bands).toHaveLength(2);
    const [theme] = (await table.ask('shapeView', null)).themes;
    const view = await table.ask('themeView', { theme: theme.id });
    expect(view.passages.some(({ transcriptName }) => transcriptName === 'P1')).toBe(false);
    expect((await table.ask('wordView', { form: 'teacher' })).lines.length).toBeGreaterThan(0);
    await table.ask('report', {
      standings: ['suggested'],
      themes: null,
      guard: true,
      format: 'csv',
    });
    await table.ask('undo', null);
    expect(await table.ask('overview', null)).toMatchObject({ stale: false, waiting: [] });
    expect((await passageOf(table)).view).toEqual(before.view);
  });

  test('codings stay where they were put when passages are divided in another way', async () => {
    const table = await newStudy(3, { fitted: true });
    const { place, view } = await passageOf(table);
    await table.ask('confirm', code(place, view.suggestions[0].theme));
    await table.ask('changeSettings', { settings: { 'text.passageMaximumWords': 30 } });
    expect(await table.refused('confirm', code(place, view.suggestions[0].theme))).toBe(
      'place changed',
    );
    const { passages } = (await transcriptsOf(table)).get('P1')!;
    const within = passages.filter(({ end }) => end <= place.end);
    expect(within.length).toBeGreaterThan(1);
    for (const passage of within) expect(passage.codings).toHaveLength(1);
  });
});
