import { describe, expect, test, vi } from 'vitest';
import type { Api, Method } from '../../../main/api.ts';
import { file, newStudy, passageOf, seen, transcriptsOf, type Table } from './table.ts';

vi.setConfig({ testTimeout: 120_000 });

/** What a person sees of a study, without the clock and the counter of decisions. */
async function sight(table: Table): Promise<unknown> {
  const overview = await table.ask('overview', null);
  const shape = await table.ask('shapeView', null);
  return {
    overview: { ...overview, savedAt: null, revision: null, undo: null, redo: null, reader: null },
    gather: await table.ask('gatherView', null),
    shape,
    themes: await Promise.all(
      shape.themes.map(async ({ id }) => table.ask('themeView', { theme: id })),
    ),
    transcripts: [...(await transcriptsOf(table)).values()],
  };
}

type Step = {
  readonly [Name in Method]: readonly [Name, Api[Name]['takes'], string];
}[Method];

/** Every decision that a window can make, one after the other, and what undo calls it. */
async function steps(table: Table): Promise<(() => Promise<Step>)[]> {
  const theme = async (place: number) => (await table.ask('shapeView', null)).themes[place];
  const transcript = async () => (await passageOf(table)).place.transcript;
  const person = async () => (await table.ask('gatherView', null)).participants[0];
  // The first passages of P1 for which the model offers the first theme, before anything is decided.
  const first = (await theme(0)).id;
  const offered: number[] = [];
  for (let index = 0; index < 8; index++) {
    const { view } = await passageOf(table, 'P1', index);
    if (view.suggestions.some((suggestion) => suggestion.theme === first)) offered.push(index);
  }
  if (offered.length < 4) throw new Error('too few passages are offered to decide on');
  const passage = (place: number) => passageOf(table, 'P1', offered[place]);
  const code = async (place: number) => ({
    place: (await passage(place)).place,
    theme: first,
    memo: '',
    ...seen,
  });
  return [
    async () => ['renameStudy', { name: 'Winter' }, 'rename of the study to Winter'],
    async () => [
      'addTranscripts',
      {
        files: [
          file('P8.txt', 'Interviewer: How was it?\nP8: The ferry was late.\n'),
          file('P9.txt', 'Interviewer: How was it?\nP9: The ferry was early.\n'),
        ],
      },
      'adding of 2 transcripts',
    ],
    async () => [
      'addAttributes',
      file('who.csv', 'participant,village\nP1,Skell\nP2,Brae\n'),
      'attributes of 2 participants',
    ],
    async () => [
      'renameTranscript',
      { transcript: await transcript(), name: 'P1 again' },
      'rename of P1 again',
    ],
    async () => [
      'renameTranscript',
      { transcript: (await table.ask('gatherView', null)).transcripts[0].id, name: 'P1' },
      'rename of P1',
    ],
    async () => [
      'assignSpeaker',
      {
        transcript: await transcript(),
        label: 'P1',
        role: 'participant',
        participant: 'Ann',
        everywhere: false,
      },
      'speakers of P1',
    ],
    async () => [
      'assignSpeaker',
      {
        transcript: await transcript(),
        label: 'Interviewer',
        role: 'other',
        participant: null,
        everywhere: true,
      },
      'speakers of 5 transcripts',
    ],
    async () => [
      'describeParticipant',
      { participant: (await person()).id, name: 'Anna', attributes: { village: 'Skell' } },
      'description of Anna',
    ],
    async () => ['changeSettings', { settings: { seed: 4 } }, 'change of the seed of fits'],
    async () => [
      'removeTranscript',
      { transcript: (await transcriptsOf(table)).get('P9')!.id },
      'removal of P9',
    ],
    async () => ['nameTheme', { theme: (await theme(0)).id, name: 'Boats' }, 'naming of Boats'],
    async () => ['nameTheme', { theme: (await theme(0)).id, name: 'Ferries' }, 'rename of Ferries'],
    async () => [
      'defineTheme',
      {
        theme: (await theme(0)).id,
        code: 'c',
        brief: 'b',
        full: 'f',
        whenToUse: 'w',
        whenNotToUse: 'n',
        examples: 'e',
      },
      'definition of Ferries',
    ],
    async () => [
      'addTheme',
      { name: 'Weather', byHand: false, seeds: ['swell', 'wind'] },
      'new theme Weather',
    ],
    async () => ['addTheme', { name: 'Shame', byHand: true, seeds: [] }, 'new theme Shame'],
    async () => ['pinTheme', { theme: (await theme(0)).id, pinned: true }, 'pin of Ferries'],
    async () => [
      'setThemeAside',
      { theme: (await theme(3)).id, aside: true },
      'setting aside of Weather',
    ],
    async () => [
      'orderThemes',
      { themes: (await table.ask('shapeView', null)).themes.map(({ id }) => id).reverse() },
      'order of the themes',
    ],
    async () => [
      'seedWord',
      { theme: (await ferries()).id, word: 'pier', seeded: true },
      'seed “pier” in Ferries',
    ],
    async () => [
      'shutOutWord',
      { theme: (await ferries()).id, word: 'gate', shutOut: true },
      'shutting out of “gate” from Ferries',
    ],
    async () => ['confirm', await code(0), 'confirmation of Ferries'],
    async () => ['reject', await code(1), 'rejection of Ferries'],
    // Takes the place of the rejection: two edits, one decision.
    async () => ['confirm', await code(1), 'Ferries'],
    async () => [
      'markNone',
      { place: (await code(2)).place, ...seen },
      'mark that no theme applies',
    ],
    // Takes the place of "no theme applies".
    async () => ['codeByHand', await code(2), 'coding with Ferries'],
    async () => ['writeMemo', { on: { kind: 'study' }, text: 'Begin again' }, 'memo'],
    async () => [
      'writeMemo',
      { on: { kind: 'transcript', transcript: await transcript() }, text: 'Loud' },
      'memo',
    ],
    async () => [
      'writeMemo',
      { on: { kind: 'passage', place: (await code(3)).place }, text: 'Here' },
      'memo',
    ],
    async () => [
      'writeMemo',
      { on: { kind: 'theme', theme: (await ferries()).id }, text: 'Split?' },
      'memo',
    ],
    async () => {
      const { place, view } = await passage(0);
      return [
        'writeMemo',
        {
          on: { kind: 'coding', transcript: place.transcript, coding: view.codings[0].id },
          text: 'So it is',
        },
        'memo on a coding with Ferries',
      ];
    },
    async () => {
      const { view } = await passage(3);
      return ['reviseMemo', { memo: view.memos[0].id, text: 'There' }, 'change of a memo'];
    },
    async () => {
      const { view } = await passage(3);
      return ['reviseMemo', { memo: view.memos[0].id, text: '' }, 'erasing of a memo'];
    },
    async () => {
      const { place, view } = await passage(0);
      return [
        'removeCoding',
        { transcript: place.transcript, coding: view.codings[0].id },
        'removal of a coding with Ferries',
      ];
    },
    async () => [
      'markNone',
      { place: (await code(0)).place, ...seen },
      'mark that no theme applies',
    ],
    async () => {
      const { place, view } = await passage(0);
      return [
        'clearNone',
        { transcript: place.transcript, none: view.none!.id },
        'clearing of a mark that no theme applies',
      ];
    },
    async () => [
      'mergeThemes',
      { into: (await ferries()).id, from: [(await candidate()).id] },
      'merge into Ferries',
    ],
    async () => ['fit', { kind: 're-fit', themes: null }, 're-fit'],
    async () => ['fit', { kind: 'from scratch', themes: 4 }, 'fit from scratch'],
    async () => [
      'chooseFit',
      { fit: (await table.ask('shapeView', null)).fits[0].id },
      'choice of a fit',
    ],
  ];

  async function ferries() {
    return (await table.ask('shapeView', null)).themes.find(({ name }) => name === 'Ferries')!;
  }
  async function candidate() {
    return (await table.ask('shapeView', null)).themes.find(({ name }) => name === null)!;
  }
}

describe('every decision of a window', () => {
  test('is taken back by one undo and done again by one redo, down to the start', async () => {
    const table = await newStudy(3);
    await table.ask('fit', { kind: 'from scratch', themes: 3 });
    const told: number[] = [];
    table.session.on('changed', ({ revision }) => told.push(revision));
    for (const step of await steps(table)) {
      const [method, takes, label] = await step();
      const before = await sight(table);
      const { undo } = (await table.ask('overview', null))!;
      await table.ask(method, takes as never);
      const overview = (await table.ask('overview', null))!;
      expect(overview.undo, method).toContain(label);
      expect(told.at(-1), method).toBe(overview.revision);
      const after = await sight(table);
      expect(after, method).not.toEqual(before);

      expect((await table.ask('undo', null)).did).toBe(overview.undo);
      expect(await sight(table), `undo of ${method}`).toEqual(before);
      expect(await table.ask('overview', null)).toMatchObject({ undo, redo: overview.undo });
      expect((await table.ask('redo', null)).did).toBe(overview.undo);
      expect(await sight(table), `redo of ${method}`).toEqual(after);
    }

    let taken = 0;
    for (let did: string | null = ''; did !== null; taken++) {
      ({ did } = await table.ask('undo', null));
    }
    expect(taken).toBeGreaterThan(35);
    expect(await table.ask('overview', null)).toMatchObject({
      study: { name: 'Crossings' },
      transcripts: 0,
      themes: 0,
      undo: null,
      fitted: false,
      reader: { name: 'Ada' },
    });
  });
});
