import { describe, expect, it } from 'vitest';
import {
  editKinds,
  emptyDefinition,
  emptyStudy,
  spansLost,
  type Coding,
  type EditKind,
  type EditOf,
  type Identifier,
  type FieldNote,
  type Study,
  type TextState,
  type Theme,
} from '../../../engine/study/index.ts';
import { holdsLaw, type Expectation } from './law.ts';
import {
  ada,
  after,
  candidate,
  coding,
  draw,
  firstFit,
  fit,
  harbour,
  having,
  island,
  maren,
  memo,
  mill,
  none,
  sea,
  silence,
  span,
  started,
  theme,
  tove,
  work,
} from './scene.ts';

const living = { id: 'living', name: 'Living' };
const leaving = { id: 'leaving', name: 'Leaving' };
const underHeadings = after(
  island,
  { kind: 'headingAdded', heading: living, place: null },
  { kind: 'headingAdded', heading: leaving, place: null },
  { kind: 'themePutUnder', theme: 'sea', from: null, to: 'living' },
);
const reworded = after(island, {
  kind: 'themeDefined',
  theme: 'sea',
  from: { version: 1, definition: emptyDefinition },
  to: { version: 2, definition: { ...emptyDefinition, brief: 'Living by the sea' } },
});

interface Case<Kind extends EditKind> {
  /** Completes "<kind> …". */
  readonly does: string;
  readonly before?: Study;
  readonly edit: EditOf<Kind>;
  readonly expected: Expectation;
}

const lars = { id: 'lars', name: 'Lars', attributes: { village: 'Nes' } };
const walk: FieldNote = {
  id: 'walk',
  name: 'Walk',
  transcript: 'harbour',
  source: { fileName: 'walk.txt', format: 'text', hash: 'h' },
  text: { sequence: 41, bytes: 12 },
  length: 12,
};
const quay = { ...harbour, id: 'quay', name: 'West/Quay' };

function changing(id: string, changes: Partial<Theme>, study = island): Expectation {
  return { themes: having(study.themes, id, { ...study.themes.get(id)!, ...changes }) };
}

function codings(transcript: string, id: string, value?: Coding, study = island): Expectation {
  const inner = having(study.codings.get(transcript) ?? new Map<string, Coding>(), id, value);
  return { codings: having(study.codings, transcript, inner.size === 0 ? undefined : inner) };
}

const theSea = { id: 'q-sea', text: 'What is the sea to you?' };
const theShop = { id: 'q-shop', text: 'How do you get to the shop?' };
const asked = after(
  island,
  { kind: 'guideRevised', from: [], to: [theSea, theShop] },
  { kind: 'turnsTagged', transcript: 'harbour', changes: [{ turn: 0, from: null, to: 'q-sea' }] },
);
const ruth: Identifier = {
  id: 'ruth',
  kind: 'person',
  forms: ['RUTH', 'Ruth'],
  decision: 'stand-in',
  replacement: 'Anna',
  putIn: ['harbour'],
  places: null,
};
const withRuth = after(island, {
  kind: 'identifierSettled',
  identifier: 'ruth',
  from: null,
  to: ruth,
});
const boat: Identifier = {
  ...ruth,
  id: 'boat',
  decision: 'left',
  replacement: null,
  putIn: [],
  places: [{ transcript: 'harbour', span: span(42, 46) }],
};
const withBoat = after(island, {
  kind: 'identifierSettled',
  identifier: 'boat',
  from: null,
  to: boat,
});

const lonely = theme('lonely', { name: 'Lonely' });
const withLonely = after(island, { kind: 'themeAdded', theme: lonely });
const mergedIntoSea = after(island, { kind: 'themesMerged', into: 'sea', from: ['work'] });
const workAside = after(island, { kind: 'themeSetAside', theme: 'work' });
const seaAside = after(island, { kind: 'themeSetAside', theme: 'sea' });
const secondFit = fit('second-fit', {
  themes: ['sea', 'work', 'late'],
  start: { kind: 'warm', seed: 2, from: 'first-fit' },
});
const late = theme('late', { name: null, origin: 'fitted' });
const secondFitting = {
  kind: 'modelFitted',
  fit: secondFit,
  found: [late],
  before: 'first-fit',
} as const;
const fittedTwice = after(island, secondFitting);

const sharedQuay = after(
  island,
  { kind: 'transcriptGathered', transcript: quay },
  {
    kind: 'speakersAssigned',
    transcript: 'quay',
    from: quay.speakers,
    to: [{ label: 'INT', role: 'participant', participant: 'tove' }, quay.speakers[1]!],
  },
  { kind: 'codingMade', coding: coding('of-tove-1', { transcript: 'quay', span: span(2, 9) }) },
  { kind: 'codingMade', coding: coding('of-both', { transcript: 'quay', span: span(20, 35) }) },
  { kind: 'codingMade', coding: coding('of-maren', { transcript: 'quay' }) },
  { kind: 'noneMarked', none: none('none-of-tove', { transcript: 'quay', span: span(31, 40) }) },
  {
    kind: 'memoWritten',
    memo: memo('of-tove', { kind: 'passage', transcript: 'quay', span: span(0, 10) }),
  },
);

const otherCopy = { head: 'aa', shared: 12, records: 31, fits: ['their-fit'], branch: null };
const bookOfHarbour = {
  what: 'docx',
  fileName: 'The island excerpts.docx',
  transcripts: ['harbour'],
  participants: ['maren'],
  at: '2031-04-05T06:07:08.000Z',
  reader: 'reader-ada',
};

const knownOnHarbour = {
  under: coding('any').under,
  strength: 0.75,
  codebookVersion: 1,
};
const knownLater = {
  under: { ...coding('any').under, at: '2031-05-01T00:00:00.000Z', seenSuggestion: false },
  strength: null,
  codebookVersion: 3,
};

const cold = draw('cold', { kind: 'cold sample', name: 'cold sample of 2, seed 7' });
const scored = { fit: 'first-fit', reader: 'reader-ada', at: '2031-05-01T00:00:00.000Z' };
const drawn = after(island, { kind: 'drawMade', draw: draw('any') });
const drawnCold = after(
  started,
  { kind: 'readerAdded', reader: ada },
  { kind: 'participantAdded', participant: maren },
  { kind: 'transcriptGathered', transcript: harbour },
  { kind: 'transcriptGathered', transcript: mill },
  { kind: 'themeAdded', theme: sea },
  { kind: 'themeAdded', theme: work },
  { kind: 'drawMade', draw: cold },
  { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
);

const steady = { themes: [{ steadiness: 0.75, passages: 4 }], floor: 0.5, note: null };

const wordedOnce: TextState = {
  text: harbour.text,
  length: harbour.length,
  turns: harbour.turns,
};

/** Harbour with 8 of its units (25 to 33, across a change of speaker) replaced by 4. */
const stretchReplaced: EditOf<'textRevised'> = {
  kind: 'textRevised',
  transcript: 'harbour',
  from: wordedOnce,
  to: {
    text: { sequence: 40, bytes: 60 },
    length: 56,
    turns: [
      { ...harbour.turns[0]! },
      { ...harbour.turns[1]!, end: 29 },
      { ...harbour.turns[2]!, start: 29, end: 36 },
      { ...harbour.turns[3]!, start: 37, end: 56 },
    ],
  },
  replacements: [{ start: 25, end: 33, inserted: 4 }],
  placed: [],
  // Its end lay inside what was replaced, so mapping back would bring it to 33.
  lost: [{ id: 'on-harbour', span: span(11, 30) }],
};

function harbourMoved(
  { to }: EditOf<'textRevised'>,
  places: { coding: [number, number]; none: [number, number]; memo: [number, number] },
): Expectation {
  const marked = none('none-on-harbour', { span: span(...places.none) });
  return {
    transcripts: having(island.transcripts, 'harbour', { ...harbour, ...to }),
    ...codings('harbour', 'on-harbour', coding('on-harbour', { span: span(...places.coding) })),
    nones: new Map([['harbour', new Map([['none-on-harbour', marked]])]]),
    memos: having(
      island.memos,
      'on-passage',
      memo('on-passage', {
        kind: 'passage',
        transcript: 'harbour',
        span: span(...places.memo),
      }),
    ),
  };
}

const allRemoved: EditOf<'textRevised'> = {
  ...stretchReplaced,
  to: {
    text: { sequence: 40, bytes: 10 },
    length: 10,
    turns: [harbour.turns[0]!],
  },
  replacements: [{ start: 10, end: 60, inserted: 0 }],
  lost: [
    { id: 'on-harbour', span: span(11, 30) },
    { id: 'none-on-harbour', span: span(41, 60) },
    { id: 'on-passage', span: span(20, 36) },
  ],
};
const emptied = after(island, allRemoved);
const emptyCoding = emptied.codings.get('harbour')!.get('on-harbour')!;

const cases: { readonly [Kind in EditKind]: readonly Case<Kind>[] } = {
  studyStarted: [
    {
      does: 'gives the study its id and its name',
      before: emptyStudy,
      edit: { kind: 'studyStarted', study: 'island', name: 'The island' },
      expected: { id: 'island', name: 'The island' },
    },
  ],
  studyRenamed: [
    {
      does: 'changes the name',
      edit: { kind: 'studyRenamed', from: 'The island', to: 'Skarvoy' },
      expected: { name: 'Skarvoy' },
    },
  ],
  settingsChanged: [
    {
      does: 'sets, changes and unsets',
      before: after(island, {
        kind: 'settingsChanged',
        changes: [{ key: 'model.themes', from: null, to: 12 }],
      }),
      edit: {
        kind: 'settingsChanged',
        changes: [
          { key: 'text.stemming', from: true, to: null },
          { key: 'model.themes', from: 12, to: 0.5 },
          { key: 'text.fillers', from: null, to: ['mm', 'you know'] },
        ],
      },
      expected: { settings: { 'model.themes': 0.5, 'text.fillers': ['mm', 'you know'] } },
    },
    {
      does: 'may change one setting twice',
      edit: {
        kind: 'settingsChanged',
        changes: [
          { key: 'text.stemming', from: true, to: false },
          { key: 'text.stemming', from: false, to: 'later' },
        ],
      },
      expected: { settings: { 'text.stemming': 'later' } },
    },
    {
      does: 'takes a key that every object has for a setting like any other',
      edit: { kind: 'settingsChanged', changes: [{ key: 'constructor', from: null, to: 1 }] },
      expected: { settings: { 'text.stemming': true, constructor: 1 } as never },
    },
  ],
  readerAdded: [
    {
      does: 'adds a reader',
      edit: { kind: 'readerAdded', reader: { id: 'reader-bo', name: 'Bo' } },
      expected: { readers: having(island.readers, 'reader-bo', { id: 'reader-bo', name: 'Bo' }) },
    },
  ],
  readerRemoved: [
    {
      does: 'removes one who decided nothing',
      before: after(started, { kind: 'readerAdded', reader: ada }),
      edit: { kind: 'readerRemoved', reader: ada },
      expected: { readers: new Map() },
    },
  ],
  transcriptGathered: [
    {
      does: 'adds a transcript',
      edit: { kind: 'transcriptGathered', transcript: quay },
      expected: { transcripts: having(island.transcripts, 'quay', quay) },
    },
  ],
  transcriptRemoved: [
    {
      does: 'removes one without decisions',
      before: after(island, { kind: 'transcriptGathered', transcript: quay }),
      edit: { kind: 'transcriptRemoved', transcript: quay },
      expected: { transcripts: island.transcripts },
    },
    {
      does: 'removes one whose only coding was removed',
      before: after(island, {
        kind: 'codingRemoved',
        coding: island.codings.get('mill')!.get('on-mill')!,
      }),
      edit: { kind: 'transcriptRemoved', transcript: mill },
      expected: { transcripts: having(island.transcripts, 'mill', undefined) },
    },
  ],
  transcriptRenamed: [
    {
      does: 'changes its name',
      edit: { kind: 'transcriptRenamed', transcript: 'mill', from: 'Mill', to: 'Old mill' },
      expected: { transcripts: having(island.transcripts, 'mill', { ...mill, name: 'Old mill' }) },
    },
  ],
  speakersAssigned: [
    {
      does: 'says whose each label is',
      edit: {
        kind: 'speakersAssigned',
        transcript: 'harbour',
        from: harbour.speakers,
        to: [
          { label: 'INT', role: 'other', participant: null },
          { label: 'MAREN', role: 'participant', participant: 'tove' },
        ],
      },
      expected: {
        transcripts: having(island.transcripts, 'harbour', {
          ...harbour,
          speakers: [
            { label: 'INT', role: 'other', participant: null },
            { label: 'MAREN', role: 'participant', participant: 'tove' },
          ],
        }),
      },
    },
  ],
  textRevised: [
    {
      does: 'maps every span, those cut by the replacement included',
      edit: stretchReplaced,
      expected: harbourMoved(stretchReplaced, { coding: [11, 29], none: [37, 56], memo: [20, 32] }),
    },
    {
      does: 'leaves words put in at the edges of a coding outside',
      edit: {
        ...stretchReplaced,
        to: {
          text: { sequence: 40, bytes: 70 },
          length: 66,
          turns: [
            { ...harbour.turns[0]! },
            { ...harbour.turns[1]!, start: 13, end: 36 },
            { ...harbour.turns[2]!, start: 37, end: 46 },
            { ...harbour.turns[3]!, start: 47, end: 66 },
          ],
        },
        replacements: [
          { start: 11, end: 11, inserted: 2 },
          { start: 30, end: 30, inserted: 4 },
        ],
        lost: [],
      },
      expected: harbourMoved(
        {
          ...stretchReplaced,
          to: {
            text: { sequence: 40, bytes: 70 },
            length: 66,
            turns: [
              { ...harbour.turns[0]! },
              { ...harbour.turns[1]!, start: 13, end: 36 },
              { ...harbour.turns[2]!, start: 37, end: 46 },
              { ...harbour.turns[3]!, start: 47, end: 66 },
            ],
          },
        },
        { coding: [13, 32], none: [47, 66], memo: [22, 42] },
      ),
    },
    {
      does: 'puts a span where a person placed it',
      edit: {
        ...stretchReplaced,
        placed: [
          { id: 'on-harbour', span: span(12, 20) },
          { id: 'on-passage', span: span(0, 3) },
        ],
        lost: [
          { id: 'on-harbour', span: span(11, 30) },
          { id: 'on-passage', span: span(20, 36) },
        ],
      },
      expected: harbourMoved(stretchReplaced, { coding: [12, 20], none: [37, 56], memo: [0, 3] }),
    },
    {
      does: 'empties the spans whose words it removes',
      edit: allRemoved,
      expected: harbourMoved(allRemoved, { coding: [10, 10], none: [10, 10], memo: [10, 10] }),
    },
    {
      does: 'moves the places of names that stay',
      before: withBoat,
      edit: stretchReplaced,
      expected: {
        ...harbourMoved(stretchReplaced, { coding: [11, 29], none: [37, 56], memo: [20, 32] }),
        identifiers: new Map([
          ['boat', { ...boat, places: [{ transcript: 'harbour', span: span(38, 42) }] }],
        ]),
      },
    },
    {
      does: 'changes a transcript without decisions',
      before: after(started, {
        kind: 'transcriptGathered',
        transcript: { ...mill, speakers: [{ label: null, role: 'other', participant: null }] },
      }),
      edit: {
        kind: 'textRevised',
        transcript: 'mill',
        from: { text: mill.text, length: 40, turns: mill.turns },
        to: {
          text: { sequence: 9, bytes: 41 },
          length: 41,
          turns: [{ ...mill.turns[0]!, end: 41 }],
        },
        replacements: [{ start: 3, end: 4, inserted: 2 }],
        placed: [],
        lost: [],
      },
      expected: {
        transcripts: new Map([
          [
            'mill',
            {
              ...mill,
              speakers: [{ label: null, role: 'other', participant: null }],
              text: { sequence: 9, bytes: 41 },
              length: 41,
              turns: [{ ...mill.turns[0]!, end: 41 }],
            },
          ],
        ]),
      },
    },
  ],
  transcriptDescribed: [
    {
      does: 'says when it was held, and names file and headings anew',
      edit: {
        kind: 'transcriptDescribed',
        transcript: 'harbour',
        from: { fileName: 'harbour.txt', details: harbour.details, facts: null },
        to: { fileName: 'P01.txt', details: [], facts: { collected: '2031-03-02', checked: true } },
      },
      expected: {
        transcripts: having(island.transcripts, 'harbour', {
          ...harbour,
          source: { ...harbour.source, fileName: 'P01.txt' },
          details: [],
          facts: { collected: '2031-03-02', checked: true },
        }),
      },
    },
  ],
  guideRevised: [
    {
      does: 'puts the questions of the guide',
      edit: { kind: 'guideRevised', from: [], to: [theSea, theShop] },
      expected: { guide: [theSea, theShop] },
    },
  ],
  turnsTagged: [
    {
      does: 'says which question a turn asks, and takes it back',
      before: asked,
      edit: {
        kind: 'turnsTagged',
        transcript: 'harbour',
        changes: [
          { turn: 0, from: 'q-sea', to: null },
          { turn: 2, from: null, to: 'q-shop' },
        ],
      },
      expected: {
        transcripts: having(asked.transcripts, 'harbour', {
          ...harbour,
          turns: harbour.turns.map((turn, index) =>
            index === 2 ? { ...turn, question: 'q-shop' } : turn,
          ),
        }),
      },
    },
  ],
  identifierSettled: [
    {
      does: 'keeps what was decided about a name',
      edit: { kind: 'identifierSettled', identifier: 'ruth', from: null, to: ruth },
      expected: { identifiers: new Map([['ruth', ruth]]) },
    },
    {
      does: 'changes it',
      before: withRuth,
      edit: {
        kind: 'identifierSettled',
        identifier: 'ruth',
        from: ruth,
        to: { ...ruth, decision: 'generalised', replacement: 'a neighbour' },
      },
      expected: {
        identifiers: new Map([
          ['ruth', { ...ruth, decision: 'generalised', replacement: 'a neighbour' }],
        ]),
      },
    },
    {
      does: 'takes it out',
      before: withRuth,
      edit: { kind: 'identifierSettled', identifier: 'ruth', from: ruth, to: null },
      expected: { identifiers: new Map() },
    },
  ],
  participantAdded: [
    {
      does: 'adds a participant',
      edit: { kind: 'participantAdded', participant: lars },
      expected: { participants: having(island.participants, 'lars', lars) },
    },
  ],
  participantRemoved: [
    {
      does: 'removes one who speaks nowhere',
      edit: { kind: 'participantRemoved', participant: tove },
      expected: { participants: having(island.participants, 'tove', undefined) },
    },
  ],
  participantDescribed: [
    {
      does: 'changes name and attributes',
      edit: {
        kind: 'participantDescribed',
        participant: 'maren',
        from: { name: 'Maren', attributes: maren.attributes },
        to: { name: 'P01', attributes: { village: 'Nes' } },
      },
      expected: {
        participants: having(island.participants, 'maren', {
          id: 'maren',
          name: 'P01',
          attributes: { village: 'Nes' },
        }),
      },
    },
  ],
  fieldNoteKept: [
    {
      does: 'keeps a note beside a transcript',
      edit: { kind: 'fieldNoteKept', note: walk },
      expected: { fieldNotes: new Map([['walk', walk]]) },
    },
    {
      does: 'keeps a note on the study as a whole',
      edit: { kind: 'fieldNoteKept', note: { ...walk, transcript: null } },
      expected: { fieldNotes: new Map([['walk', { ...walk, transcript: null }]]) },
    },
  ],
  fieldNoteLetGo: [
    {
      does: 'removes it',
      before: after(island, { kind: 'fieldNoteKept', note: walk }),
      edit: { kind: 'fieldNoteLetGo', note: walk },
      expected: { fieldNotes: new Map() },
    },
  ],
  fieldNoteDescribed: [
    {
      does: 'changes its name and the transcript that it speaks of',
      before: after(island, { kind: 'fieldNoteKept', note: walk }),
      edit: {
        kind: 'fieldNoteDescribed',
        note: 'walk',
        from: { name: 'Walk', transcript: 'harbour' },
        to: { name: 'Walk home', transcript: null },
      },
      expected: {
        fieldNotes: new Map([['walk', { ...walk, name: 'Walk home', transcript: null }]]),
      },
    },
  ],
  themeAdded: [
    {
      does: 'puts a theme at the end of the codebook',
      edit: { kind: 'themeAdded', theme: lonely },
      expected: { themes: having(island.themes, 'lonely', lonely) },
    },
    {
      does: 'puts a theme where it is told',
      edit: { kind: 'themeAdded', theme: lonely, place: 1 },
      expected: {
        themes: new Map(
          [sea, lonely, silence, work, candidate].map((each) => [each.id, each] as const),
        ),
      },
    },
    {
      does: 'lets a theme take the name of one that was merged away',
      before: mergedIntoSea,
      edit: { kind: 'themeAdded', theme: theme('new-work', { name: 'Work' }) },
      expected: {
        themes: having(mergedIntoSea.themes, 'new-work', theme('new-work', { name: 'Work' })),
      },
    },
  ],
  themeRemoved: [
    {
      does: 'takes the last theme out',
      before: withLonely,
      edit: { kind: 'themeRemoved', theme: lonely, place: null },
      expected: { themes: island.themes },
    },
    {
      does: 'takes a theme out of the middle, to which an undo brings it back',
      edit: { kind: 'themeRemoved', theme: silence, place: 1 },
      expected: { themes: having(island.themes, 'silence', undefined) },
    },
    {
      does: 'takes out a theme that was merged away, pointer and all',
      before: after(
        withLonely,
        { kind: 'themesMerged', into: 'sea', from: ['lonely'] },
        { kind: 'themeSetAside', theme: 'sea' },
      ),
      edit: { kind: 'themeRemoved', theme: { ...lonely, mergedInto: 'sea' }, place: null },
      expected: { themes: seaAside.themes },
    },
  ],
  themeRenamed: [
    {
      does: 'names a candidate',
      edit: { kind: 'themeRenamed', theme: 'candidate', from: null, to: 'Weather' },
      expected: changing('candidate', { name: 'Weather' }),
    },
    {
      does: 'may change nothing but the case',
      edit: { kind: 'themeRenamed', theme: 'sea', from: 'sea', to: 'Sea' },
      expected: changing('sea', { name: 'Sea' }),
    },
  ],
  themeDefined: [
    {
      does: 'rewords the codebook entry and counts the wording',
      edit: {
        kind: 'themeDefined',
        theme: 'sea',
        from: { version: 1, definition: emptyDefinition },
        to: { version: 2, definition: { ...emptyDefinition, brief: 'Living by and off the sea' } },
      },
      expected: changing('sea', {
        version: 2,
        definition: { ...emptyDefinition, brief: 'Living by and off the sea' },
      }),
    },
  ],
  headingAdded: [
    {
      does: 'adds a name over themes, with nothing under it',
      edit: { kind: 'headingAdded', heading: living, place: null },
      expected: { headings: new Map([['living', living]]) },
    },
    {
      does: 'puts it at its place among the others',
      before: underHeadings,
      edit: { kind: 'headingAdded', heading: { id: 'time', name: 'Time' }, place: 1 },
      expected: {
        headings: new Map([
          ['living', living],
          ['time', { id: 'time', name: 'Time' }],
          ['leaving', leaving],
        ]),
      },
    },
  ],
  headingRemoved: [
    {
      does: 'takes a heading out that no theme stands under',
      before: underHeadings,
      edit: { kind: 'headingRemoved', heading: leaving, place: 1 },
      expected: { headings: new Map([['living', living]]) },
    },
  ],
  headingRenamed: [
    {
      does: 'gives another name and keeps the place',
      before: underHeadings,
      edit: { kind: 'headingRenamed', heading: 'living', from: 'Living', to: 'Living here' },
      expected: {
        headings: new Map([
          ['living', { id: 'living', name: 'Living here' }],
          ['leaving', leaving],
        ]),
      },
    },
  ],
  themePutUnder: [
    {
      does: 'puts a theme under a heading',
      before: underHeadings,
      edit: { kind: 'themePutUnder', theme: 'silence', from: null, to: 'living' },
      expected: { under: having(underHeadings.under, 'silence', 'living') },
    },
    {
      does: 'moves a theme from one heading to another',
      before: underHeadings,
      edit: { kind: 'themePutUnder', theme: 'sea', from: 'living', to: 'leaving' },
      expected: { under: new Map([['sea', 'leaving']]) },
    },
    {
      does: 'takes a theme out from under its heading, merged away or not',
      before: after(underHeadings, { kind: 'themesMerged', into: 'work', from: ['sea'] }),
      edit: { kind: 'themePutUnder', theme: 'sea', from: 'living', to: null },
      expected: { under: new Map() },
    },
  ],
  themePinned: [
    {
      does: 'pins a theme',
      edit: { kind: 'themePinned', theme: 'sea' },
      expected: changing('sea', { pinned: true }),
    },
  ],
  themeUnpinned: [
    {
      does: 'unpins a theme',
      before: after(island, { kind: 'themePinned', theme: 'sea' }),
      edit: { kind: 'themeUnpinned', theme: 'sea' },
      expected: changing('sea', { pinned: false }),
    },
    {
      does: 'unpins a theme that was set aside since',
      before: after(
        island,
        { kind: 'themePinned', theme: 'sea' },
        { kind: 'themeSetAside', theme: 'sea' },
      ),
      edit: { kind: 'themeUnpinned', theme: 'sea' },
      expected: changing('sea', { setAside: true }),
    },
  ],
  themeSetAside: [
    {
      does: 'takes a theme out of the model and keeps it',
      edit: { kind: 'themeSetAside', theme: 'work' },
      expected: changing('work', { setAside: true }),
    },
  ],
  themeBroughtBack: [
    {
      does: 'brings a theme back',
      before: workAside,
      edit: { kind: 'themeBroughtBack', theme: 'work' },
      expected: { themes: island.themes },
    },
  ],
  themesMerged: [
    {
      does: 'leaves pointers, and codings and seeds where they are',
      edit: { kind: 'themesMerged', into: 'work', from: ['sea', 'candidate'] },
      expected: {
        themes: having(having(island.themes, 'sea', { ...sea, mergedInto: 'work' }), 'candidate', {
          ...candidate,
          mergedInto: 'work',
        }),
      },
    },
    {
      does: 'lets a theme by hand join one with words',
      edit: { kind: 'themesMerged', into: 'sea', from: ['silence'] },
      expected: changing('silence', { mergedInto: 'sea' }),
    },
    {
      does: 'may follow upon an earlier merge',
      before: mergedIntoSea,
      edit: { kind: 'themesMerged', into: 'candidate', from: ['sea'] },
      expected: changing('sea', { mergedInto: 'candidate' }, mergedIntoSea),
    },
  ],
  themesUnmerged: [
    {
      does: 'takes the pointers away',
      before: mergedIntoSea,
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work'] },
      expected: { themes: island.themes },
    },
    {
      does: 'does so even where the other theme was set aside since',
      before: after(mergedIntoSea, { kind: 'themeSetAside', theme: 'sea' }),
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work'] },
      expected: { themes: seaAside.themes },
    },
    {
      does: 'does so even where the other theme was itself merged since',
      before: after(mergedIntoSea, { kind: 'themesMerged', into: 'candidate', from: ['sea'] }),
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work'] },
      expected: changing('sea', { mergedInto: 'candidate' }),
    },
  ],
  themesOrdered: [
    {
      does: 'puts the codebook in another order',
      edit: {
        kind: 'themesOrdered',
        from: ['sea', 'silence', 'work', 'candidate'],
        to: ['candidate', 'sea', 'silence', 'work'],
      },
      expected: {
        themes: new Map([candidate, sea, silence, work].map((each) => [each.id, each] as const)),
      },
    },
  ],
  wordSeeded: [
    {
      does: 'puts a word among the seeds, in code-unit order',
      edit: { kind: 'wordSeeded', theme: 'sea', word: 'net' },
      expected: changing('sea', { seeds: ['boat', 'net', 'tide'] }),
    },
  ],
  wordUnseeded: [
    {
      does: 'takes a seed away',
      edit: { kind: 'wordUnseeded', theme: 'sea', word: 'boat' },
      expected: changing('sea', { seeds: ['tide'] }),
    },
    {
      does: 'takes a seed away from a theme that is set aside',
      before: seaAside,
      edit: { kind: 'wordUnseeded', theme: 'sea', word: 'boat' },
      expected: changing('sea', { seeds: ['tide'] }, seaAside),
    },
  ],
  wordShutOut: [
    {
      does: 'shuts a word out, in code-unit order',
      edit: { kind: 'wordShutOut', theme: 'sea', word: 'Zion' },
      expected: changing('sea', { shutOut: ['Zion', 'flour'] }),
    },
    {
      does: 'shuts a word out of the only theme there is before the first fit',
      before: after(started, { kind: 'themeAdded', theme: work }),
      edit: { kind: 'wordShutOut', theme: 'work', word: 'boat' },
      expected: { themes: new Map([['work', { ...work, shutOut: ['boat'] }]]) },
    },
  ],
  wordLetIn: [
    {
      does: 'lets a word in again',
      edit: { kind: 'wordLetIn', theme: 'sea', word: 'flour' },
      expected: changing('sea', { shutOut: [] }),
    },
    {
      does: 'lets a word in that no theme was left for',
      before: after(
        island,
        { kind: 'themeSetAside', theme: 'work' },
        { kind: 'themeSetAside', theme: 'candidate' },
      ),
      edit: { kind: 'wordLetIn', theme: 'sea', word: 'flour' },
      expected: {
        themes: new Map(
          [
            { ...sea, shutOut: [] },
            silence,
            { ...work, setAside: true },
            { ...candidate, setAside: true },
          ].map((each) => [each.id, each] as const),
        ),
      },
    },
  ],
  codingMade: [
    {
      does: 'adds a coding beside others',
      edit: { kind: 'codingMade', coding: coding('second', { span: span(0, 60) }) },
      expected: codings('harbour', 'second', coding('second', { span: span(0, 60) })),
    },
    {
      does: 'makes the first of a transcript, before any fit',
      before: after(
        started,
        { kind: 'readerAdded', reader: ada },
        { kind: 'participantAdded', participant: maren },
        { kind: 'transcriptGathered', transcript: harbour },
        { kind: 'themeAdded', theme: silence },
      ),
      edit: {
        kind: 'codingMade',
        coding: coding('cold', {
          theme: 'silence',
          standing: 'by hand',
          strength: null,
          under: { ...coding('cold').under, fit: null, seenSuggestion: false },
        }),
      },
      expected: {
        codings: new Map([
          [
            'harbour',
            new Map([
              [
                'cold',
                coding('cold', {
                  theme: 'silence',
                  standing: 'by hand',
                  strength: null,
                  under: { ...coding('cold').under, fit: null, seenSuggestion: false },
                }),
              ],
            ]),
          ],
        ]),
      },
    },
  ],
  codingRemoved: [
    {
      does: 'leaves nothing of the last one of a transcript',
      edit: { kind: 'codingRemoved', coding: coding('on-harbour') },
      expected: codings('harbour', 'on-harbour'),
    },
    {
      does: 'removes a coding whose theme was merged away',
      before: mergedIntoSea,
      edit: { kind: 'codingRemoved', coding: mergedIntoSea.codings.get('mill')!.get('on-mill')! },
      expected: codings('mill', 'on-mill'),
    },
    {
      does: 'removes a coding whose words are gone',
      before: emptied,
      edit: { kind: 'codingRemoved', coding: emptyCoding },
      expected: codings('harbour', 'on-harbour', undefined, emptied),
    },
  ],
  codingLookedAtAgain: [
    {
      does: 'keeps a coding under a later wording, with all that was known when it was made',
      before: reworded,
      edit: {
        kind: 'codingLookedAtAgain',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: 1,
        to: 2,
      },
      expected: codings(
        'harbour',
        'on-harbour',
        coding('on-harbour', { codebookVersion: 2 }),
        reworded,
      ),
    },
  ],
  codingRevised: [
    {
      does: 'changes standing, span and memo, and not what was known then',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { theme: 'sea', standing: 'confirmed', span: span(11, 30), memo: '' },
        to: { theme: 'sea', standing: 'by hand', span: span(12, 13), memo: 'A pause.' },
      },
      expected: codings(
        'harbour',
        'on-harbour',
        coding('on-harbour', { standing: 'by hand', span: span(12, 13), memo: 'A pause.' }),
      ),
    },
    {
      does: 'moves a coding to another theme, with what is known about that one',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: {
          theme: 'sea',
          standing: 'confirmed',
          span: span(11, 30),
          memo: '',
          known: knownOnHarbour,
        },
        to: {
          theme: 'silence',
          standing: 'by hand',
          span: span(11, 30),
          memo: '',
          known: knownLater,
        },
      },
      expected: codings(
        'harbour',
        'on-harbour',
        coding('on-harbour', { theme: 'silence', standing: 'by hand', ...knownLater }),
      ),
    },
    {
      does: 'moves a coding away from a theme that was merged',
      before: mergedIntoSea,
      edit: {
        kind: 'codingRevised',
        transcript: 'mill',
        coding: 'on-mill',
        from: {
          theme: 'work',
          standing: 'confirmed',
          span: span(0, 12),
          memo: '',
          known: knownOnHarbour,
        },
        to: {
          theme: 'silence',
          standing: 'confirmed',
          span: span(0, 12),
          memo: '',
          known: knownLater,
        },
      },
      expected: codings(
        'mill',
        'on-mill',
        coding('on-mill', {
          transcript: 'mill',
          span: span(0, 12),
          theme: 'silence',
          ...knownLater,
        }),
      ),
    },
    {
      does: 'rejects a coding whose words are gone, where it stands',
      before: emptied,
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { theme: 'sea', standing: 'confirmed', span: span(10, 10), memo: '' },
        to: { theme: 'sea', standing: 'rejected', span: span(10, 10), memo: 'Gone.' },
      },
      expected: codings(
        'harbour',
        'on-harbour',
        { ...emptyCoding, standing: 'rejected', memo: 'Gone.' },
        emptied,
      ),
    },
    {
      does: 'gives a coding whose words are gone another span',
      before: emptied,
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { theme: 'sea', standing: 'confirmed', span: span(10, 10), memo: '' },
        to: { theme: 'sea', standing: 'confirmed', span: span(2, 8), memo: '' },
      },
      expected: codings('harbour', 'on-harbour', { ...emptyCoding, span: span(2, 8) }, emptied),
    },
  ],
  noneMarked: [
    {
      does: 'marks a passage to which no theme applies',
      edit: { kind: 'noneMarked', none: none('quiet', { transcript: 'mill', span: span(3, 9) }) },
      expected: {
        nones: having(
          island.nones,
          'mill',
          new Map([['quiet', none('quiet', { transcript: 'mill', span: span(3, 9) })]]),
        ),
      },
    },
  ],
  noneCleared: [
    {
      does: 'leaves nothing of the last one of a transcript',
      edit: { kind: 'noneCleared', none: none('none-on-harbour', { span: span(41, 60) }) },
      expected: { nones: new Map() },
    },
  ],
  memoWritten: [
    {
      does: 'writes one about a theme',
      edit: { kind: 'memoWritten', memo: memo('about', { kind: 'theme', theme: 'sea' }) },
      expected: {
        memos: having(island.memos, 'about', memo('about', { kind: 'theme', theme: 'sea' })),
      },
    },
    {
      does: 'writes one about a transcript',
      edit: {
        kind: 'memoWritten',
        memo: memo('about', { kind: 'transcript', transcript: 'mill' }),
      },
      expected: {
        memos: having(
          island.memos,
          'about',
          memo('about', { kind: 'transcript', transcript: 'mill' }),
        ),
      },
    },
  ],
  memoErased: [
    {
      does: 'erases one',
      edit: { kind: 'memoErased', memo: memo('on-study') },
      expected: { memos: having(island.memos, 'on-study', undefined) },
    },
    {
      does: 'erases one about words that are gone',
      before: emptied,
      edit: { kind: 'memoErased', memo: emptied.memos.get('on-passage')! },
      expected: { memos: having(emptied.memos, 'on-passage', undefined) },
    },
  ],
  memoRevised: [
    {
      does: 'rewords one',
      edit: { kind: 'memoRevised', memo: 'on-study', from: 'why', to: 'Why not?\n' },
      expected: {
        memos: having(island.memos, 'on-study', { ...memo('on-study'), text: 'Why not?\n' }),
      },
    },
  ],
  drawMade: [
    {
      does: 'records which passages were drawn, and how',
      edit: { kind: 'drawMade', draw: draw('new') },
      expected: { draws: new Map([['new', draw('new')]]) },
    },
    {
      does: 'records a cold sample before the first fit',
      before: after(
        started,
        { kind: 'readerAdded', reader: ada },
        { kind: 'participantAdded', participant: maren },
        { kind: 'transcriptGathered', transcript: harbour },
        { kind: 'transcriptGathered', transcript: mill },
      ),
      edit: { kind: 'drawMade', draw: cold },
      expected: { draws: new Map([['cold', cold]]) },
    },
  ],
  drawRemoved: [
    {
      does: 'takes a draw away',
      before: drawn,
      edit: { kind: 'drawRemoved', draw: draw('any') },
      expected: { draws: new Map() },
    },
  ],
  drawScored: [
    {
      does: 'holds a cold sample against a fit',
      before: drawnCold,
      edit: { kind: 'drawScored', draw: 'cold', from: null, to: scored },
      expected: { draws: new Map([['cold', { ...cold, scored }]]) },
    },
  ],
  modelFitted: [
    {
      does: 'brings a fit on screen and its candidates into the codebook',
      edit: secondFitting,
      expected: {
        fits: having(island.fits, 'second-fit', secondFit),
        fit: 'second-fit',
        themes: having(island.themes, 'late', late),
      },
    },
    {
      does: 'is taken back whole, so that the themes asked for before it can be as well',
      before: after(
        started,
        { kind: 'themeAdded', theme: sea },
        { kind: 'themeAdded', theme: work },
      ),
      edit: { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
      expected: {
        fits: new Map([['first-fit', firstFit]]),
        fit: 'first-fit',
        themes: new Map([sea, work, candidate].map((each) => [each.id, each] as const)),
      },
    },
  ],
  fitRemoved: [
    {
      does: 'takes the fit and its candidates away and shows the one before',
      before: fittedTwice,
      edit: { kind: 'fitRemoved', fit: secondFit, found: [late], before: 'first-fit' },
      expected: { fits: island.fits, fit: 'first-fit', themes: island.themes },
    },
  ],
  fitChosen: [
    {
      does: 'shows another fit',
      before: fittedTwice,
      edit: { kind: 'fitChosen', from: 'second-fit', to: 'first-fit' },
      expected: { fit: 'first-fit' },
    },
    {
      does: 'may show none',
      edit: { kind: 'fitChosen', from: 'first-fit', to: null },
      expected: { fit: null },
    },
  ],
  fitRenamed: [
    {
      does: 'names a fit',
      edit: { kind: 'fitRenamed', fit: 'first-fit', from: null, to: 'Pilot' },
      expected: { fits: having(island.fits, 'first-fit', { ...firstFit, name: 'Pilot' }) },
    },
  ],
  evidenceGathered: [
    {
      does: 'keeps what was measured with its fit',
      edit: {
        kind: 'evidenceGathered',
        fit: 'first-fit',
        what: 'steadiness',
        result: steady,
        before: null,
      },
      expected: {
        fits: having(island.fits, 'first-fit', { ...firstFit, evidence: { steadiness: steady } }),
      },
    },
    {
      does: 'takes the place of older evidence of its kind alone',
      before: after(
        island,
        {
          kind: 'evidenceGathered',
          fit: 'first-fit',
          what: 'how many',
          result: [3, 4],
          before: null,
        },
        {
          kind: 'evidenceGathered',
          fit: 'first-fit',
          what: 'steadiness',
          result: steady,
          before: null,
        },
      ),
      edit: {
        kind: 'evidenceGathered',
        fit: 'first-fit',
        what: 'steadiness',
        result: { themes: [] },
        before: steady,
      },
      expected: {
        fits: having(island.fits, 'first-fit', {
          ...firstFit,
          evidence: { 'how many': [3, 4], steadiness: { themes: [] } },
        }),
      },
    },
  ],
  participantWithdrawn: [
    {
      does: 'takes a person away with their transcripts and all that was decided on these',
      before: after(island, {
        kind: 'transcriptRenamed',
        transcript: 'mill',
        from: 'Mill',
        to: 'The mill',
      }),
      edit: {
        kind: 'participantWithdrawn',
        participant: 'maren',
        transcripts: ['harbour', 'mill'],
        shared: [],
      },
      expected: {
        participants: new Map([['tove', tove]]),
        transcripts: new Map(),
        codings: new Map(),
        nones: new Map(),
        memos: new Map([['on-study', memo('on-study')]]),
        withdrawn: new Map([['maren', { transcripts: ['harbour', 'mill'], shared: [] }]]),
      },
    },
    {
      does: 'leaves turns without a person, and nothing decided on them, where others speak as well',
      before: sharedQuay,
      edit: {
        kind: 'participantWithdrawn',
        participant: 'tove',
        transcripts: [],
        shared: ['quay'],
      },
      expected: {
        participants: having(sharedQuay.participants, 'tove', undefined),
        transcripts: having(sharedQuay.transcripts, 'quay', {
          ...quay,
          speakers: [
            { label: 'INT', role: 'other', participant: null },
            { label: 'MAREN', role: 'participant', participant: 'maren' },
          ],
        }),
        codings: having(
          sharedQuay.codings,
          'quay',
          new Map([['of-maren', coding('of-maren', { transcript: 'quay' })]]),
        ),
        nones: having(sharedQuay.nones, 'quay', undefined),
        memos: having(sharedQuay.memos, 'of-tove', undefined),
        withdrawn: new Map([['tove', { transcripts: [], shared: ['quay'] }]]),
      },
    },
    {
      does: 'folds also where the records of the transcripts are gone',
      before: after(
        started,
        { kind: 'participantAdded', participant: maren },
        { kind: 'participantAdded', participant: tove },
      ),
      edit: {
        kind: 'participantWithdrawn',
        participant: 'maren',
        transcripts: ['harbour', 'mill'],
        shared: [],
      },
      expected: {
        participants: new Map([['tove', tove]]),
        withdrawn: new Map([['maren', { transcripts: ['harbour', 'mill'], shared: [] }]]),
      },
    },
  ],
  originalsSealed: [
    {
      does: 'is known of each transcript',
      edit: { kind: 'originalsSealed', transcripts: ['harbour'] },
      expected: { sealed: new Set(['harbour']) },
    },
  ],
  fitsForgotten: [
    {
      does: 'takes fits away, and off the screen, and leaves codings made under them',
      edit: { kind: 'fitsForgotten', fits: ['first-fit'] },
      expected: { fits: new Map(), fit: null, absentFits: new Set(['first-fit']) },
    },
    {
      does: 'leaves a later fit on screen',
      before: fittedTwice,
      edit: { kind: 'fitsForgotten', fits: ['first-fit'] },
      expected: {
        fits: having(fittedTwice.fits, 'first-fit', undefined),
        absentFits: new Set(['first-fit']),
      },
    },
  ],
  copyTakenIn: [
    {
      does: 'remembers the copy and the fits that only it has',
      edit: { kind: 'copyTakenIn', copy: otherCopy },
      expected: { takenIn: [otherCopy], absentFits: new Set(['their-fit']) },
    },
  ],
  copyLetGo: [
    {
      does: 'forgets it',
      before: after(
        island,
        { kind: 'copyTakenIn', copy: { ...otherCopy, head: 'ab', fits: ['their-fit', 'older'] } },
        { kind: 'copyTakenIn', copy: otherCopy },
      ),
      edit: { kind: 'copyLetGo', copy: otherCopy },
      expected: { takenIn: [{ ...otherCopy, head: 'ab', fits: ['their-fit', 'older'] }] },
    },
  ],
  reportExported: [
    {
      does: 'is kept, and undo passes it over',
      edit: { kind: 'reportExported', report: bookOfHarbour },
      expected: { exported: [bookOfHarbour] },
    },
  ],
};

describe('the table of edits', () => {
  it('has a case for every kind, and for no other', () => {
    expect(Object.keys(cases).sort()).toEqual([...editKinds].sort());
    expect(editKinds.filter((kind) => cases[kind].length === 0)).toEqual([]);
  });
});

for (const kind of Object.keys(cases) as EditKind[]) {
  describe(kind, () => {
    for (const { does, before = island, edit, expected } of cases[kind] as Case<EditKind>[]) {
      it(does, () => {
        holdsLaw(before, edit, expected);
      });
    }
  });
}

describe('spans that mapping back would not restore', () => {
  it('are those that end inside a replaced stretch or lost all their words', () => {
    expect(spansLost(island, stretchReplaced)).toEqual(stretchReplaced.lost);
    expect(spansLost(island, allRemoved)).toEqual(allRemoved.lost);
  });

  it('are those that a person placed elsewhere', () => {
    const placed = [{ id: 'none-on-harbour', span: span(1, 2) }];
    expect(spansLost(island, { transcript: 'harbour', replacements: [], placed })).toEqual([
      { id: 'none-on-harbour', span: span(41, 60) },
    ]);
  });

  it('are none on another transcript', () => {
    expect(spansLost(island, { ...allRemoved, transcript: 'quay' })).toEqual([]);
  });
});
