import { describe, expect, it } from 'vitest';
import {
  apply,
  emptyDefinition,
  emptyStudy,
  refusalCodes,
  type Edit,
  type Identifier,
  type FieldNote,
  type RefusalCode,
  type SettingValue,
  type Study,
} from '../../../engine/study/index.ts';
import { nextEntry } from './law.ts';
import { frozen, plainToTheLast } from './plain.ts';
import {
  ada,
  after,
  candidate,
  coding,
  draw,
  firstFit,
  fit,
  harbour,
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
const headed = after(
  island,
  { kind: 'headingAdded', heading: living, place: null },
  { kind: 'headingAdded', heading: { id: 'leaving', name: 'Leaving' }, place: null },
  { kind: 'themePutUnder', theme: 'silence', from: null, to: 'living' },
);
const coded = after(island, {
  kind: 'themeDefined',
  theme: 'sea',
  from: { version: 1, definition: emptyDefinition },
  to: { version: 2, definition: { ...emptyDefinition, code: 'SEA' } },
});
const lookedAt = {
  kind: 'codingLookedAtAgain',
  transcript: 'harbour',
  coding: 'on-harbour',
} as const;

interface Case {
  /** Completes "refuses …". */
  readonly what: string;
  readonly before?: Study;
  readonly edit: Edit;
  readonly subject: string;
}

const otherCopy = { head: 'aa', shared: 12, records: 31, fits: [], branch: null };
const walk: FieldNote = {
  id: 'walk',
  name: 'Walk',
  transcript: 'mill',
  source: { fileName: 'walk.txt', format: 'text', hash: 'h' },
  text: { sequence: 41, bytes: 12 },
  length: 12,
};
const merged = after(island, { kind: 'themesMerged', into: 'sea', from: ['work'] });
const aside = after(island, { kind: 'themeSetAside', theme: 'work' });
const onHarbour = coding('on-harbour');
const asItWas = { theme: 'sea', standing: 'confirmed', span: span(11, 30), memo: '' } as const;
const cold = draw('cold', { kind: 'cold sample', name: 'cold sample' });
const drawn = after(island, { kind: 'drawMade', draw: draw('any') });
const drawnCold = after(
  started,
  { kind: 'readerAdded', reader: ada },
  { kind: 'participantAdded', participant: maren },
  { kind: 'transcriptGathered', transcript: harbour },
  { kind: 'transcriptGathered', transcript: mill },
  { kind: 'drawMade', draw: cold },
);
const knownThen = { under: onHarbour.under, strength: 0.75, codebookVersion: 1 };
const harbourText = { text: harbour.text, length: harbour.length, turns: harbour.turns };
const revised: Extract<Edit, { kind: 'textRevised' }> = {
  kind: 'textRevised',
  transcript: 'harbour',
  from: harbourText,
  to: {
    text: { sequence: 40, bytes: 65 },
    length: 61,
    turns: [...harbour.turns.slice(0, 3), { ...harbour.turns[3]!, end: 61 }],
  },
  replacements: [{ start: 50, end: 50, inserted: 1 }],
  placed: [],
  lost: [],
};

const question = { id: 'q', text: 'What is the sea?' };
const withQuestion = after(
  island,
  { kind: 'guideRevised', from: [], to: [question] },
  { kind: 'turnsTagged', transcript: 'harbour', changes: [{ turn: 0, from: null, to: 'q' }] },
);
const name: Identifier = {
  id: 'name',
  kind: 'person',
  forms: ['Ruth'],
  decision: 'stand-in',
  replacement: 'Anna',
  putIn: [],
  places: null,
};

function settled(to: Identifier | null, from: Identifier | null = null): Edit {
  return { kind: 'identifierSettled', identifier: 'name', from, to };
}

function setting(value: unknown, key = 'model.themes'): Edit {
  return { kind: 'settingsChanged', changes: [{ key, from: null, to: value as SettingValue }] };
}

function made(changes: Parameters<typeof coding>[1]): Edit {
  return { kind: 'codingMade', coding: coding('new', changes) };
}

const refusals: { readonly [Code in RefusalCode]: readonly Case[] } = {
  'already there': [
    {
      what: 'a heading twice',
      before: headed,
      edit: { kind: 'headingAdded', heading: { ...living, name: 'Other' }, place: null },
      subject: 'Other',
    },
    {
      what: 'a copy that was taken in as it is',
      before: after(island, { kind: 'copyTakenIn', copy: otherCopy }),
      edit: { kind: 'copyTakenIn', copy: { ...otherCopy, shared: 3 } },
      subject: 'aa',
    },
    { what: 'a reader twice', edit: { kind: 'readerAdded', reader: ada }, subject: 'Ada' },
    {
      what: 'a transcript twice',
      edit: { kind: 'transcriptGathered', transcript: { ...mill, name: 'Mill again' } },
      subject: 'Mill again',
    },
    {
      what: 'one label for two speakers',
      edit: {
        kind: 'speakersAssigned',
        transcript: 'harbour',
        from: harbour.speakers,
        to: [...harbour.speakers, { label: 'INT', role: 'other', participant: null }],
      },
      subject: 'INT',
    },
    {
      what: 'a participant twice',
      edit: { kind: 'participantAdded', participant: { ...tove, name: 'Another' } },
      subject: 'Another',
    },
    { what: 'a theme twice', edit: { kind: 'themeAdded', theme: sea }, subject: 'sea' },
    {
      what: 'a draw twice',
      before: drawn,
      edit: { kind: 'drawMade', draw: draw('any') },
      subject: 'random draw any',
    },
    {
      what: 'two draws of one name',
      before: drawn,
      edit: { kind: 'drawMade', draw: draw('new', { name: 'random draw any' }) },
      subject: 'random draw any',
    },
    {
      what: 'a second cold sample',
      before: drawnCold,
      edit: { kind: 'drawMade', draw: { ...cold, id: 'colder', name: 'another' } },
      subject: 'cold sample',
    },
    {
      what: 'a coding twice',
      edit: { kind: 'codingMade', coding: onHarbour },
      subject: 'on-harbour',
    },
    {
      what: 'a none twice',
      edit: { kind: 'noneMarked', none: none('none-on-harbour') },
      subject: 'none-on-harbour',
    },
    {
      what: 'a memo twice',
      edit: { kind: 'memoWritten', memo: memo('on-study') },
      subject: 'on-study',
    },
    {
      what: 'a fit twice',
      edit: { kind: 'modelFitted', fit: firstFit, found: [], before: 'first-fit' },
      subject: 'first-fit',
    },
    {
      what: 'a fit that finds a theme that is there',
      edit: { kind: 'modelFitted', fit: fit('f'), found: [candidate], before: 'first-fit' },
      subject: 'candidate',
    },
  ],
  'changed since': [
    {
      what: 'to put a heading where there is no place',
      edit: { kind: 'headingAdded', heading: living, place: 1 },
      subject: 'Living',
    },
    {
      what: 'to remove a heading that is named otherwise by now',
      before: headed,
      edit: { kind: 'headingRemoved', heading: { id: 'leaving', name: 'Gone' }, place: 1 },
      subject: 'Leaving',
    },
    {
      what: 'to rename a heading that is named otherwise by now',
      before: headed,
      edit: { kind: 'headingRenamed', heading: 'living', from: 'Life', to: 'Lives' },
      subject: 'Living',
    },
    {
      what: 'to move a theme that stands elsewhere by now',
      before: headed,
      edit: { kind: 'themePutUnder', theme: 'silence', from: null, to: 'leaving' },
      subject: 'silence',
    },
    {
      what: 'to keep a coding of another wording',
      before: coded,
      edit: { ...lookedAt, from: 2, to: 1 },
      subject: 'on-harbour',
    },
    {
      what: 'to let a copy go that was not the last',
      edit: { kind: 'copyLetGo', copy: otherCopy },
      subject: 'aa',
    },
    {
      what: 'to settle a name that was settled otherwise',
      edit: settled(name, { ...name, replacement: 'Ida' }),
      subject: 'Ruth',
    },
    {
      what: 'to revise a guide that reads otherwise',
      edit: { kind: 'guideRevised', from: [question], to: [] },
      subject: 'The island',
    },
    {
      what: 'to tag a turn that is tagged otherwise',
      before: withQuestion,
      edit: {
        kind: 'turnsTagged',
        transcript: 'harbour',
        changes: [{ turn: 0, from: null, to: 'q' }],
      },
      subject: 'Harbour',
    },
    {
      what: 'to describe a transcript that is described otherwise',
      edit: {
        kind: 'transcriptDescribed',
        transcript: 'harbour',
        from: { fileName: 'x', details: [], facts: null },
        to: { fileName: 'y', details: [], facts: null },
      },
      subject: 'Harbour',
    },
    {
      what: 'to rename a study that has another name',
      edit: { kind: 'studyRenamed', from: 'Isle', to: 'Skarvoy' },
      subject: 'The island',
    },
    {
      what: 'to change a setting from what it is not',
      edit: setting(3, 'text.stemming'),
      subject: 'text.stemming',
    },
    {
      what: 'to unset what every object inherits',
      edit: {
        kind: 'settingsChanged',
        changes: [{ key: 'toString', from: 'x', to: null }],
      },
      subject: 'toString',
    },
    {
      what: 'to remove a reader under another name',
      edit: { kind: 'readerRemoved', reader: { ...ada, name: 'Adam' } },
      subject: 'Ada',
    },
    {
      what: 'to remove a transcript as it was before',
      edit: { kind: 'transcriptRemoved', transcript: { ...mill, length: 41 } },
      subject: 'Mill',
    },
    {
      what: 'to rename a transcript that has another name',
      edit: { kind: 'transcriptRenamed', transcript: 'mill', from: 'Old', to: 'New' },
      subject: 'Mill',
    },
    {
      what: 'to assign speakers over others',
      edit: { kind: 'speakersAssigned', transcript: 'mill', from: [], to: mill.speakers },
      subject: 'Mill',
    },
    {
      what: 'to revise another text',
      edit: { ...revised, from: { ...harbourText, text: { sequence: 3, bytes: 64 } } },
      subject: 'Harbour',
    },
    {
      what: 'to revise a text and forget a span that mapping back would not restore',
      edit: {
        ...revised,
        to: { ...revised.to, length: 60, turns: harbour.turns },
        replacements: [{ start: 28, end: 31, inserted: 3 }],
      },
      subject: 'Harbour',
    },
    {
      what: 'to place a span and forget where it was',
      edit: { ...revised, placed: [{ id: 'on-harbour', span: span(0, 4) }] },
      subject: 'Harbour',
    },
    {
      what: 'to remember a span wrongly',
      edit: { ...revised, lost: [{ id: 'on-harbour', span: span(11, 29) }] },
      subject: 'Harbour',
    },
    {
      what: 'to place a span that is not there',
      edit: { ...revised, placed: [{ id: 'on-mill', span: span(0, 4) }] },
      subject: 'Harbour',
    },
    {
      what: 'to remove a participant as described before',
      edit: { kind: 'participantRemoved', participant: { ...tove, attributes: { a: 'b' } } },
      subject: 'Tove',
    },
    {
      what: 'to describe a participant who is described otherwise',
      edit: {
        kind: 'participantDescribed',
        participant: 'tove',
        from: { name: 'Tove', attributes: { a: 'b' } },
        to: { name: 'P02', attributes: {} },
      },
      subject: 'Tove',
    },
    {
      what: 'to remove a theme as it was before',
      edit: { kind: 'themeRemoved', theme: { ...silence, pinned: true }, place: 1 },
      subject: 'silence',
    },
    {
      what: 'to remove a theme from a place where it does not stand',
      edit: { kind: 'themeRemoved', theme: silence, place: null },
      subject: 'silence',
    },
    {
      what: 'to add a theme past the end',
      edit: { kind: 'themeAdded', theme: theme('new'), place: 5 },
      subject: 'new',
    },
    {
      what: 'to rename a theme that has another name',
      edit: { kind: 'themeRenamed', theme: 'sea', from: null, to: 'Water' },
      subject: 'sea',
    },
    {
      what: 'to define a theme over another wording',
      edit: {
        kind: 'themeDefined',
        theme: 'sea',
        from: { version: 2, definition: emptyDefinition },
        to: { version: 3, definition: emptyDefinition },
      },
      subject: 'sea',
    },
    {
      what: 'to take apart what was not merged',
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work'] },
      subject: 'work',
    },
    {
      what: 'to order a codebook that has another order',
      edit: { kind: 'themesOrdered', from: ['work', 'sea'], to: ['sea', 'work'] },
      subject: '',
    },
    {
      what: 'to remove a coding as it was before',
      edit: { kind: 'codingRemoved', coding: { ...onHarbour, memo: 'x' } },
      subject: 'on-harbour',
    },
    {
      what: 'to revise a coding that stands otherwise',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { ...asItWas, standing: 'rejected' },
        to: asItWas,
      },
      subject: 'on-harbour',
    },
    {
      what: 'to move a coding about which something else was known',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { ...asItWas, known: { ...knownThen, strength: 0.5 } },
        to: asItWas,
      },
      subject: 'on-harbour',
    },
    {
      what: 'to take away a draw of other passages',
      before: drawn,
      edit: { kind: 'drawRemoved', draw: draw('any', { places: [] }) },
      subject: 'random draw any',
    },
    {
      what: 'to score a cold sample that is scored otherwise',
      before: drawnCold,
      edit: {
        kind: 'drawScored',
        draw: 'cold',
        from: { fit: 'f', reader: 'reader-ada', at: '' },
        to: null,
      },
      subject: 'cold sample',
    },
    {
      what: 'to clear a none elsewhere',
      edit: { kind: 'noneCleared', none: none('none-on-harbour') },
      subject: 'none-on-harbour',
    },
    {
      what: 'to erase a memo as it was before',
      edit: { kind: 'memoErased', memo: { ...memo('on-study'), text: 'x' } },
      subject: 'on-study',
    },
    {
      what: 'to reword a memo that reads otherwise',
      edit: { kind: 'memoRevised', memo: 'on-study', from: 'x', to: 'y' },
      subject: 'on-study',
    },
    {
      what: 'a fit that was to follow upon another',
      edit: { kind: 'modelFitted', fit: fit('f'), found: [], before: null },
      subject: 'f',
    },
    {
      what: 'to take back a fit whose candidate was named since',
      before: after(island, {
        kind: 'themeRenamed',
        theme: 'candidate',
        from: null,
        to: 'Weather',
      }),
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: null },
      subject: 'first-fit',
    },
    {
      what: 'to leave a fit that is not on screen',
      edit: { kind: 'fitChosen', from: null, to: 'first-fit' },
      subject: '',
    },
    {
      what: 'to rename a fit that has another name',
      edit: { kind: 'fitRenamed', fit: 'first-fit', from: 'a', to: 'b' },
      subject: 'first-fit',
    },
    {
      what: 'to replace evidence that is not the evidence there is',
      edit: {
        kind: 'evidenceGathered',
        fit: 'first-fit',
        what: 'steadiness',
        result: [1],
        before: [2],
      },
      subject: 'first-fit',
    },
  ],
  'code taken': [
    {
      what: 'a code that is another theme’s',
      before: coded,
      edit: {
        kind: 'themeDefined',
        theme: 'work',
        from: { version: 1, definition: emptyDefinition },
        to: { version: 2, definition: { ...emptyDefinition, code: 'sea' } },
      },
      subject: 'sea',
    },
  ],
  'codings remain': [
    {
      what: 'to remove a transcript with codings',
      edit: { kind: 'transcriptRemoved', transcript: mill },
      subject: 'Mill',
    },
    {
      what: 'to remove a transcript where only a none is marked',
      before: after(island, { kind: 'codingRemoved', coding: onHarbour }),
      edit: { kind: 'transcriptRemoved', transcript: harbour },
      subject: 'Harbour',
    },
  ],
  'empty name': [
    {
      what: 'a heading without a name',
      edit: { kind: 'headingAdded', heading: { id: 'living', name: ' ' }, place: null },
      subject: 'living',
    },
    {
      what: 'a stand-in of nothing',
      edit: settled({ ...name, replacement: ' ' }),
      subject: 'name',
    },
    {
      what: 'an empty question',
      edit: { kind: 'guideRevised', from: [], to: [{ id: 'q', text: ' ' }] },
      subject: 'q',
    },
    {
      what: 'to start a study without a name',
      before: emptyStudy,
      edit: { kind: 'studyStarted', study: 'id', name: ' ' },
      subject: 'id',
    },
    {
      what: 'a blank name for the study',
      edit: { kind: 'studyRenamed', from: 'The island', to: '\t' },
      subject: 'The island',
    },
    {
      what: 'a reader without a name',
      edit: { kind: 'readerAdded', reader: { id: 'r', name: '' } },
      subject: 'r',
    },
    {
      what: 'a transcript without a name',
      edit: { kind: 'transcriptGathered', transcript: { ...mill, id: 'm', name: '' } },
      subject: 'mill.txt',
    },
    {
      what: 'a blank name for a transcript',
      edit: { kind: 'transcriptRenamed', transcript: 'mill', from: 'Mill', to: ' ' },
      subject: 'Mill',
    },
    {
      what: 'a participant without a name',
      edit: { kind: 'participantAdded', participant: { id: 'p', name: '', attributes: {} } },
      subject: 'p',
    },
    {
      what: 'a theme with a blank name',
      edit: { kind: 'themeAdded', theme: theme('t', { name: '  ' }) },
      subject: 't',
    },
    {
      what: 'a theme without a name that no fit found',
      edit: { kind: 'themeAdded', theme: theme('t', { name: null }) },
      subject: 't',
    },
    {
      what: 'to take the name of a theme that was asked for',
      edit: { kind: 'themeRenamed', theme: 'sea', from: 'sea', to: null },
      subject: 'sea',
    },
    {
      what: 'an empty word among the seeds',
      edit: { kind: 'wordSeeded', theme: 'sea', word: '' },
      subject: 'sea',
    },
    {
      what: 'to shut an empty word out',
      edit: { kind: 'wordShutOut', theme: 'sea', word: ' ' },
      subject: 'sea',
    },
  ],
  'fit is in use': [
    {
      what: 'to take back a fit that a cold sample was held against',
      before: after(
        drawnCold,
        { kind: 'themeAdded', theme: sea },
        { kind: 'themeAdded', theme: work },
        { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
        {
          kind: 'drawScored',
          draw: 'cold',
          from: null,
          to: { fit: 'first-fit', reader: 'reader-ada', at: '2031-05-01T00:00:00.000Z' },
        },
      ),
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: null },
      subject: 'first-fit',
    },
    {
      what: 'to take back a fit under which something was decided',
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: null },
      subject: 'first-fit',
    },
    {
      what: 'to take back a fit from which another started',
      before: after(
        started,
        { kind: 'themeAdded', theme: sea },
        { kind: 'themeAdded', theme: work },
        { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
        {
          kind: 'modelFitted',
          fit: fit('f', { start: { kind: 'warm', seed: 1, from: 'first-fit' } }),
          found: [],
          before: 'first-fit',
        },
        { kind: 'fitChosen', from: 'f', to: 'first-fit' },
      ),
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: null },
      subject: 'first-fit',
    },
  ],
  'heading in use': [
    {
      what: 'to remove a heading that a theme stands under',
      before: headed,
      edit: { kind: 'headingRemoved', heading: living, place: 0 },
      subject: 'Living',
    },
  ],
  'field notes remain': [
    {
      what: 'to remove a transcript beside which a field note stands',
      before: after(
        island,
        { kind: 'transcriptGathered', transcript: { ...mill, id: 'quay', name: 'Quay' } },
        { kind: 'fieldNoteKept', note: { ...walk, transcript: 'quay' } },
      ),
      edit: { kind: 'transcriptRemoved', transcript: { ...mill, id: 'quay', name: 'Quay' } },
      subject: 'Quay',
    },
  ],
  'unknown field note': [
    {
      what: 'to remove a field note that is not there',
      edit: { kind: 'fieldNoteLetGo', note: walk },
      subject: 'Walk',
    },
    {
      what: 'to describe a field note that is not there',
      edit: {
        kind: 'fieldNoteDescribed',
        note: 'walk',
        from: { name: 'Walk', transcript: 'mill' },
        to: { name: 'Way', transcript: null },
      },
      subject: 'Walk',
    },
  ],
  'memos remain': [
    {
      what: 'to remove a transcript that a memo is about',
      before: after(
        island,
        { kind: 'transcriptGathered', transcript: { ...mill, id: 'quay', name: 'Quay' } },
        { kind: 'memoWritten', memo: memo('m', { kind: 'transcript', transcript: 'quay' }) },
      ),
      edit: { kind: 'transcriptRemoved', transcript: { ...mill, id: 'quay', name: 'Quay' } },
      subject: 'Quay',
    },
    {
      what: 'to remove a transcript with a memo on a passage',
      before: after(
        island,
        { kind: 'codingRemoved', coding: onHarbour },
        { kind: 'noneCleared', none: none('none-on-harbour', { span: span(41, 60) }) },
      ),
      edit: { kind: 'transcriptRemoved', transcript: harbour },
      subject: 'Harbour',
    },
  ],
  'merge into itself': [
    {
      what: 'to merge a theme into itself',
      edit: { kind: 'themesMerged', into: 'sea', from: ['work', 'sea'] },
      subject: 'sea',
    },
    {
      what: 'to merge nothing',
      edit: { kind: 'themesMerged', into: 'sea', from: [] },
      subject: 'sea',
    },
  ],
  'merged theme': [
    {
      what: 'to put a merged theme under a heading',
      before: after(headed, { kind: 'themesMerged', into: 'sea', from: ['work'] }),
      edit: { kind: 'themePutUnder', theme: 'work', from: null, to: 'living' },
      subject: 'work',
    },
    {
      what: 'to merge into a theme that was merged away',
      before: merged,
      edit: { kind: 'themesMerged', into: 'work', from: ['candidate'] },
      subject: 'work',
    },
    {
      what: 'to merge a theme twice',
      before: merged,
      edit: { kind: 'themesMerged', into: 'candidate', from: ['work'] },
      subject: 'work',
    },
    {
      what: 'to name a theme twice in one merge',
      edit: { kind: 'themesMerged', into: 'sea', from: ['work', 'work'] },
      subject: 'work',
    },
    {
      what: 'to rename a theme that was merged away',
      before: merged,
      edit: { kind: 'themeRenamed', theme: 'work', from: 'work', to: 'Toil' },
      subject: 'work',
    },
    {
      what: 'a coding with a theme that was merged away',
      before: merged,
      edit: made({ theme: 'work' }),
      subject: 'work',
    },
    {
      what: 'to move a coding to a theme that was merged away',
      before: merged,
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: { ...asItWas, known: knownThen },
        to: { ...asItWas, theme: 'work', known: knownThen },
      },
      subject: 'work',
    },
    {
      what: 'to add a theme that is merged already',
      edit: { kind: 'themeAdded', theme: theme('new', { mergedInto: 'sea' }) },
      subject: 'new',
    },
    {
      what: 'a fit made before one of its themes was merged',
      before: merged,
      edit: { kind: 'modelFitted', fit: fit('f'), found: [], before: 'first-fit' },
      subject: 'work',
    },
  ],
  'name taken': [
    {
      what: 'a heading by the name of another',
      before: headed,
      edit: { kind: 'headingRenamed', heading: 'leaving', from: 'Leaving', to: ' living' },
      subject: ' living',
    },
    {
      what: 'two transcripts of one name',
      edit: { kind: 'transcriptGathered', transcript: { ...mill, id: 'm' } },
      subject: 'Mill',
    },
    {
      what: 'to give a transcript the name of another',
      edit: { kind: 'transcriptRenamed', transcript: 'mill', from: 'Mill', to: 'Harbour' },
      subject: 'Harbour',
    },
    {
      what: 'two participants of one name',
      edit: { kind: 'participantAdded', participant: { ...tove, id: 't' } },
      subject: 'Tove',
    },
    {
      what: 'to give a participant the name of another',
      edit: {
        kind: 'participantDescribed',
        participant: 'tove',
        from: { name: 'Tove', attributes: {} },
        to: { name: 'Maren', attributes: {} },
      },
      subject: 'Maren',
    },
    {
      what: 'names of themes that differ in case and spaces only',
      edit: { kind: 'themeAdded', theme: theme('new', { name: ' SEA ' }) },
      subject: 'sea',
    },
    {
      what: 'to name a candidate like a theme that is set aside',
      before: aside,
      edit: { kind: 'themeRenamed', theme: 'candidate', from: null, to: 'Work' },
      subject: 'work',
    },
    {
      what: 'a fit whose found theme has a name that is taken',
      edit: {
        kind: 'modelFitted',
        fit: fit('f'),
        found: [theme('new', { origin: 'fitted', name: 'Sea' })],
        before: 'first-fit',
      },
      subject: 'sea',
    },
    {
      what: 'to take a theme out of a merge whose name was given away',
      before: after(merged, { kind: 'themeAdded', theme: theme('new', { name: 'Work' }) }),
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work'] },
      subject: 'Work',
    },
    {
      what: 'to take two themes of one name out of a merge',
      before: after(
        merged,
        { kind: 'themeAdded', theme: theme('new', { name: 'Work' }) },
        { kind: 'themesMerged', into: 'sea', from: ['new'] },
      ),
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['work', 'new'] },
      subject: 'work',
    },
  ],
  'no speaker': [
    {
      what: 'a transcript with a label that is nobody’s',
      edit: {
        kind: 'transcriptGathered',
        transcript: { ...harbour, id: 'h', name: 'H', speakers: [harbour.speakers[0]!] },
      },
      subject: 'MAREN',
    },
    {
      what: 'to take a speaker from turns without a label',
      edit: { kind: 'speakersAssigned', transcript: 'mill', from: mill.speakers, to: [] },
      subject: '',
    },
    {
      what: 'to revise a text so that a turn is nobody’s',
      edit: {
        ...revised,
        to: {
          ...revised.to,
          turns: [...harbour.turns.slice(0, 3), { ...harbour.turns[3]!, speaker: 'WHO' }],
        },
      },
      subject: 'WHO',
    },
  ],
  'not a participant': [
    {
      what: 'an interviewer who is a participant',
      edit: {
        kind: 'speakersAssigned',
        transcript: 'mill',
        from: mill.speakers,
        to: [{ label: null, role: 'interviewer', participant: 'maren' }],
      },
      subject: '',
    },
  ],
  'nothing to undo': [],
  'outside the text': [
    {
      what: 'a name left behind the end',
      edit: settled({
        ...name,
        decision: 'left',
        replacement: null,
        places: [{ transcript: 'harbour', span: span(50, 61) }],
      }),
      subject: 'Harbour',
    },
    {
      what: 'to tag a turn that is not there',
      before: withQuestion,
      edit: {
        kind: 'turnsTagged',
        transcript: 'harbour',
        changes: [{ turn: 9, from: null, to: 'q' }],
      },
      subject: 'Harbour',
    },
    { what: 'a coding past the end', edit: made({ span: span(50, 61) }), subject: 'Harbour' },
    { what: 'a coding before the start', edit: made({ span: span(-1, 4) }), subject: 'Harbour' },
    { what: 'an empty coding', edit: made({ span: span(4, 4) }), subject: 'Harbour' },
    { what: 'a reversed coding', edit: made({ span: span(9, 4) }), subject: 'Harbour' },
    { what: 'half a unit', edit: made({ span: span(0.5, 4) }), subject: 'Harbour' },
    { what: 'a coding that ends nowhere', edit: made({ span: span(0, NaN) }), subject: 'Harbour' },
    {
      what: 'to stretch a coding past the end',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: asItWas,
        to: { ...asItWas, span: span(11, 61) },
      },
      subject: 'Harbour',
    },
    {
      what: 'a draw past the end',
      edit: {
        kind: 'drawMade',
        draw: draw('d', { places: [{ transcript: 'mill', span: span(0, 41) }] }),
      },
      subject: 'Mill',
    },
    {
      what: 'a none past the end',
      edit: { kind: 'noneMarked', none: none('n', { span: span(50, 61) }) },
      subject: 'Harbour',
    },
    {
      what: 'a memo past the end',
      edit: {
        kind: 'memoWritten',
        memo: memo('m', { kind: 'passage', transcript: 'mill', span: span(0, 41) }),
      },
      subject: 'Mill',
    },
    {
      what: 'a transcript with turns past its end',
      edit: {
        kind: 'transcriptGathered',
        transcript: { ...mill, id: 'm', name: 'M', length: 39 },
      },
      subject: 'M',
    },
    {
      what: 'a transcript whose turns overlap',
      edit: {
        kind: 'transcriptGathered',
        transcript: { ...mill, id: 'm', name: 'M', turns: [mill.turns[0]!, mill.turns[0]!] },
      },
      subject: 'M',
    },
    {
      what: 'replacements that do not lead to the new length',
      edit: { ...revised, to: { ...revised.to, length: 62 } },
      subject: 'Harbour',
    },
    {
      what: 'replacements that overlap',
      edit: {
        ...revised,
        replacements: [
          { start: 50, end: 53, inserted: 4 },
          { start: 52, end: 53, inserted: 1 },
        ],
      },
      subject: 'Harbour',
    },
    {
      what: 'a replacement past the end',
      edit: { ...revised, replacements: [{ start: 60, end: 61, inserted: 2 }] },
      subject: 'Harbour',
    },
    {
      what: 'to place a span past the new end',
      edit: {
        ...revised,
        placed: [{ id: 'on-harbour', span: span(11, 62) }],
        lost: [{ id: 'on-harbour', span: span(11, 30) }],
      },
      subject: 'Harbour',
    },
  ],
  'question in use': [
    {
      what: 'to take a question away that turns are tagged with',
      before: withQuestion,
      edit: { kind: 'guideRevised', from: [question], to: [] },
      subject: 'What is the sea?',
    },
  ],
  'participant in use': [
    {
      what: 'to remove a participant who speaks somewhere',
      edit: { kind: 'participantRemoved', participant: maren },
      subject: 'Maren',
    },
  ],
  'reader in use': [
    {
      what: 'to remove a reader who decided something',
      edit: { kind: 'readerRemoved', reader: ada },
      subject: 'Ada',
    },
    {
      what: 'to remove a reader who only wrote a memo',
      before: after(
        started,
        { kind: 'readerAdded', reader: ada },
        { kind: 'memoWritten', memo: memo('m') },
      ),
      edit: { kind: 'readerRemoved', reader: ada },
      subject: 'Ada',
    },
  ],
  'same as before': [
    {
      what: 'to put a theme where it stands',
      before: headed,
      edit: { kind: 'themePutUnder', theme: 'silence', from: 'living', to: 'living' },
      subject: 'silence',
    },
    {
      what: 'to keep a coding under its own wording',
      before: coded,
      edit: { ...lookedAt, from: 1, to: 1 },
      subject: 'on-harbour',
    },
    {
      what: 'to pin a pinned theme',
      before: after(island, { kind: 'themePinned', theme: 'sea' }),
      edit: { kind: 'themePinned', theme: 'sea' },
      subject: 'sea',
    },
    {
      what: 'to unpin a theme that is not pinned',
      edit: { kind: 'themeUnpinned', theme: 'sea' },
      subject: 'sea',
    },
    {
      what: 'to set a theme aside twice',
      before: aside,
      edit: { kind: 'themeSetAside', theme: 'work' },
      subject: 'work',
    },
    {
      what: 'to bring back what was never set aside',
      edit: { kind: 'themeBroughtBack', theme: 'work' },
      subject: 'work',
    },
    {
      what: 'to take nothing out of a merge',
      edit: { kind: 'themesUnmerged', into: 'sea', from: [] },
      subject: 'sea',
    },
  ],
  'shut out everywhere': [
    {
      what: 'to shut a word out of the last theme of the fit that has it',
      before: after(
        island,
        { kind: 'wordShutOut', theme: 'work', word: 'rain' },
        { kind: 'wordShutOut', theme: 'candidate', word: 'rain' },
      ),
      edit: { kind: 'wordShutOut', theme: 'sea', word: 'rain' },
      subject: 'rain',
    },
  ],
  'study already started': [
    {
      what: 'to start a study twice',
      edit: { kind: 'studyStarted', study: 'other', name: 'Other' },
      subject: 'The island',
    },
  ],
  'study not started': [
    {
      what: 'any edit before the start',
      before: emptyStudy,
      edit: { kind: 'readerAdded', reader: ada },
      subject: '',
    },
  ],
  'theme by hand': [
    {
      what: 'to pin a theme by hand',
      edit: { kind: 'themePinned', theme: 'silence' },
      subject: 'silence',
    },
    {
      what: 'seeds of a theme by hand',
      edit: { kind: 'wordSeeded', theme: 'silence', word: 'mm' },
      subject: 'silence',
    },
    {
      what: 'to merge a theme with words into one by hand',
      edit: { kind: 'themesMerged', into: 'silence', from: ['work'] },
      subject: 'silence',
    },
    {
      what: 'a fit of a theme by hand',
      edit: {
        kind: 'modelFitted',
        fit: fit('f', { themes: ['silence'] }),
        found: [],
        before: 'first-fit',
      },
      subject: 'silence',
    },
  ],
  'theme in use': [
    {
      what: 'to remove a theme that stands under a heading',
      before: headed,
      edit: { kind: 'themeRemoved', theme: silence, place: 1 },
      subject: 'silence',
    },
    {
      what: 'to remove a theme of a fit',
      edit: { kind: 'themeRemoved', theme: work, place: 2 },
      subject: 'work',
    },
    {
      what: 'to remove a theme with a coding',
      before: after(island, made({ theme: 'silence' })),
      edit: { kind: 'themeRemoved', theme: silence, place: 1 },
      subject: 'silence',
    },
    {
      what: 'to remove a theme that a memo is about',
      before: after(island, {
        kind: 'memoWritten',
        memo: memo('m', { kind: 'theme', theme: 'silence' }),
      }),
      edit: { kind: 'themeRemoved', theme: silence, place: 1 },
      subject: 'silence',
    },
    {
      what: 'to remove a theme into which others were merged',
      before: after(
        island,
        { kind: 'themeAdded', theme: theme('a', { origin: 'by hand' }) },
        { kind: 'themesMerged', into: 'a', from: ['silence'] },
      ),
      edit: { kind: 'themeRemoved', theme: theme('a', { origin: 'by hand' }), place: null },
      subject: 'a',
    },
    {
      what: 'to take back a fit whose candidate a memo is about',
      before: after(
        started,
        { kind: 'readerAdded', reader: ada },
        { kind: 'themeAdded', theme: sea },
        { kind: 'themeAdded', theme: work },
        { kind: 'modelFitted', fit: firstFit, found: [candidate], before: null },
        { kind: 'memoWritten', memo: memo('m', { kind: 'theme', theme: 'candidate' }) },
      ),
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: null },
      subject: 'candidate',
    },
  ],
  'theme set aside': [
    {
      what: 'to pin a theme that is set aside',
      before: aside,
      edit: { kind: 'themePinned', theme: 'work' },
      subject: 'work',
    },
    {
      what: 'to shut a word out of a theme that is set aside',
      before: aside,
      edit: { kind: 'wordShutOut', theme: 'work', word: 'boat' },
      subject: 'work',
    },
    {
      what: 'to merge into a theme that is set aside',
      before: aside,
      edit: { kind: 'themesMerged', into: 'work', from: ['sea'] },
      subject: 'work',
    },
    {
      what: 'to merge a theme that is set aside',
      before: aside,
      edit: { kind: 'themesMerged', into: 'sea', from: ['work'] },
      subject: 'work',
    },
    {
      what: 'a fit made before one of its themes was set aside',
      before: aside,
      edit: { kind: 'modelFitted', fit: fit('f'), found: [], before: 'first-fit' },
      subject: 'work',
    },
  ],
  'unknown coding': [
    {
      what: 'to keep a coding that is not there',
      before: coded,
      edit: { ...lookedAt, coding: 'gone', from: 1, to: 2 },
      subject: 'gone',
    },
    {
      what: 'to remove a coding that is not there',
      edit: { kind: 'codingRemoved', coding: coding('gone') },
      subject: 'gone',
    },
    {
      what: 'to revise a coding on a transcript where it is not',
      edit: {
        kind: 'codingRevised',
        transcript: 'mill',
        coding: 'on-harbour',
        from: asItWas,
        to: asItWas,
      },
      subject: 'on-harbour',
    },
    {
      what: 'to clear a none that is not there',
      edit: { kind: 'noneCleared', none: none('gone') },
      subject: 'gone',
    },
  ],
  'fitted already': [
    {
      what: 'a cold sample after the first fit',
      edit: { kind: 'drawMade', draw: cold },
      subject: 'cold sample',
    },
  ],
  'unknown draw': [
    {
      what: 'to take away a draw that is not there',
      edit: { kind: 'drawRemoved', draw: draw('gone') },
      subject: 'random draw gone',
    },
    {
      what: 'to score a draw that is no cold sample',
      before: drawn,
      edit: { kind: 'drawScored', draw: 'any', from: null, to: null },
      subject: 'any',
    },
  ],
  'unknown fit': [
    {
      what: 'to erase one twice',
      edit: { kind: 'fitsForgotten', fits: ['first-fit', 'first-fit'] },
      subject: 'first-fit',
    },
    {
      what: 'to score a cold sample against a fit that is not there',
      before: drawnCold,
      edit: {
        kind: 'drawScored',
        draw: 'cold',
        from: null,
        to: { fit: 'gone', reader: 'reader-ada', at: '' },
      },
      subject: 'gone',
    },
    {
      what: 'to show a fit that is not there',
      edit: { kind: 'fitChosen', from: 'first-fit', to: 'gone' },
      subject: 'gone',
    },
    {
      what: 'to name a fit that is not there',
      edit: { kind: 'fitRenamed', fit: 'gone', from: null, to: 'x' },
      subject: 'gone',
    },
    {
      what: 'evidence about a fit that is not there',
      edit: {
        kind: 'evidenceGathered',
        fit: 'gone',
        what: 'how many',
        result: {},
        before: null,
      },
      subject: 'gone',
    },
    {
      what: 'to take back a fit that is not there',
      edit: { kind: 'fitRemoved', fit: fit('gone'), found: [], before: null },
      subject: 'gone',
    },
    {
      what: 'to go back to a fit that is not there',
      edit: { kind: 'fitRemoved', fit: firstFit, found: [candidate], before: 'gone' },
      subject: 'gone',
    },
    {
      what: 'a fit that starts from one that is not there',
      edit: {
        kind: 'modelFitted',
        fit: fit('f', { start: { kind: 'warm', seed: 1, from: 'gone' } }),
        found: [],
        before: 'first-fit',
      },
      subject: 'gone',
    },
    {
      what: 'a coding decided under a fit that is not there',
      edit: made({ under: { ...onHarbour.under, fit: 'gone' } }),
      subject: 'gone',
    },
  ],
  'unknown heading': [
    {
      what: 'to remove a heading that is not there',
      edit: { kind: 'headingRemoved', heading: living, place: null },
      subject: 'Living',
    },
    {
      what: 'to rename a heading that is not there',
      edit: { kind: 'headingRenamed', heading: 'living', from: 'a', to: 'b' },
      subject: 'living',
    },
    {
      what: 'to put a theme under a heading that is not there',
      edit: { kind: 'themePutUnder', theme: 'sea', from: null, to: 'living' },
      subject: 'living',
    },
  ],
  'unknown memo': [
    {
      what: 'to erase a memo that is not there',
      edit: { kind: 'memoErased', memo: memo('gone') },
      subject: 'gone',
    },
    {
      what: 'to reword a memo that is not there',
      edit: { kind: 'memoRevised', memo: 'gone', from: 'why', to: 'y' },
      subject: 'gone',
    },
  ],
  'unknown question': [
    {
      what: 'to tag a turn with a question that the guide does not have',
      edit: {
        kind: 'turnsTagged',
        transcript: 'harbour',
        changes: [{ turn: 0, from: null, to: 'q' }],
      },
      subject: 'q',
    },
  ],
  'unknown participant': [
    {
      what: 'to withdraw somebody twice',
      before: after(island, {
        kind: 'participantWithdrawn',
        participant: 'tove',
        transcripts: [],
        shared: [],
      }),
      edit: { kind: 'participantWithdrawn', participant: 'tove', transcripts: [], shared: [] },
      subject: 'tove',
    },
    {
      what: 'to remove a participant who is not there',
      edit: { kind: 'participantRemoved', participant: { ...tove, id: 'gone' } },
      subject: 'Tove',
    },
    {
      what: 'to describe a participant who is not there',
      edit: {
        kind: 'participantDescribed',
        participant: 'gone',
        from: { name: 'Gone', attributes: {} },
        to: { name: 'P', attributes: {} },
      },
      subject: 'Gone',
    },
    {
      what: 'a speaker who is a participant that is not there',
      edit: {
        kind: 'transcriptGathered',
        transcript: {
          ...mill,
          id: 'm',
          name: 'M',
          speakers: [{ label: null, role: 'participant', participant: 'gone' }],
        },
      },
      subject: 'gone',
    },
    {
      what: 'a speaker who is no particular participant',
      edit: {
        kind: 'speakersAssigned',
        transcript: 'harbour',
        from: harbour.speakers,
        to: [harbour.speakers[0]!, { label: 'MAREN', role: 'participant', participant: null }],
      },
      subject: 'MAREN',
    },
  ],
  'unknown reader': [
    {
      what: 'to remove a reader who is not there',
      edit: { kind: 'readerRemoved', reader: { id: 'gone', name: 'Gone' } },
      subject: 'Gone',
    },
    {
      what: 'a coding by nobody',
      edit: made({ under: { ...onHarbour.under, reader: 'gone' } }),
      subject: 'gone',
    },
    {
      what: 'a none by nobody',
      edit: { kind: 'noneMarked', none: none('n', { under: { ...onHarbour.under, reader: 'x' } }) },
      subject: 'x',
    },
    {
      what: 'a memo by nobody',
      edit: { kind: 'memoWritten', memo: { ...memo('m'), reader: 'gone' } },
      subject: 'gone',
    },
  ],
  'unknown theme': [
    {
      what: 'to put a theme under a heading that is not there',
      before: headed,
      edit: { kind: 'themePutUnder', theme: 'gone', from: null, to: 'living' },
      subject: 'gone',
    },
    {
      what: 'to remove a theme that is not there',
      edit: { kind: 'themeRemoved', theme: theme('gone'), place: null },
      subject: 'gone',
    },
    {
      what: 'to rename a theme that is not there',
      edit: { kind: 'themeRenamed', theme: 'gone', from: null, to: 'x' },
      subject: 'gone',
    },
    {
      what: 'to seed a theme that is not there',
      edit: { kind: 'wordSeeded', theme: 'gone', word: 'x' },
      subject: 'gone',
    },
    {
      what: 'to merge into a theme that is not there',
      edit: { kind: 'themesMerged', into: 'gone', from: ['sea'] },
      subject: 'gone',
    },
    {
      what: 'to merge a theme that is not there',
      edit: { kind: 'themesMerged', into: 'sea', from: ['work', 'gone'] },
      subject: 'gone',
    },
    {
      what: 'to take a theme that is not there out of a merge',
      edit: { kind: 'themesUnmerged', into: 'sea', from: ['gone'] },
      subject: 'gone',
    },
    {
      what: 'an order that leaves a theme out',
      edit: {
        kind: 'themesOrdered',
        from: ['sea', 'silence', 'work', 'candidate'],
        to: ['sea', 'silence', 'work'],
      },
      subject: '',
    },
    {
      what: 'an order that has a theme twice',
      edit: {
        kind: 'themesOrdered',
        from: ['sea', 'silence', 'work', 'candidate'],
        to: ['sea', 'silence', 'work', 'sea'],
      },
      subject: '',
    },
    {
      what: 'an order of themes that are not there',
      edit: {
        kind: 'themesOrdered',
        from: ['sea', 'silence', 'work', 'candidate'],
        to: ['sea', 'silence', 'work', 'gone'],
      },
      subject: 'gone',
    },
    { what: 'a coding with no theme', edit: made({ theme: 'gone' }), subject: 'gone' },
    {
      what: 'a memo about a theme that is not there',
      edit: { kind: 'memoWritten', memo: memo('m', { kind: 'theme', theme: 'gone' }) },
      subject: 'gone',
    },
    {
      what: 'a fit of a theme that is not there',
      edit: {
        kind: 'modelFitted',
        fit: fit('f', { themes: ['sea', 'gone'] }),
        found: [],
        before: 'first-fit',
      },
      subject: 'gone',
    },
  ],
  'unknown transcript': [
    {
      what: 'to seal one that is not there',
      edit: { kind: 'originalsSealed', transcripts: ['harbour', 'quay'] },
      subject: 'quay',
    },
    {
      what: 'to remove a transcript that is not there',
      edit: { kind: 'transcriptRemoved', transcript: { ...mill, id: 'gone' } },
      subject: 'Mill',
    },
    {
      what: 'to rename a transcript that is not there',
      edit: { kind: 'transcriptRenamed', transcript: 'gone', from: 'Gone', to: 'x' },
      subject: 'Gone',
    },
    {
      what: 'to assign speakers of a transcript that is not there',
      edit: { kind: 'speakersAssigned', transcript: 'gone', from: [], to: [] },
      subject: 'gone',
    },
    {
      what: 'to revise a text that is not there',
      edit: { ...revised, transcript: 'gone' },
      subject: 'gone',
    },
    { what: 'a coding nowhere', edit: made({ transcript: 'gone' }), subject: 'gone' },
    {
      what: 'a none nowhere',
      edit: { kind: 'noneMarked', none: none('n', { transcript: 'gone' }) },
      subject: 'gone',
    },
    {
      what: 'a memo about a transcript that is not there',
      edit: { kind: 'memoWritten', memo: memo('m', { kind: 'transcript', transcript: 'gone' }) },
      subject: 'gone',
    },
  ],
  'unusable value': [
    {
      what: 'to keep a coding under a wording to come',
      before: coded,
      edit: { ...lookedAt, from: 1, to: 3 },
      subject: 'on-harbour',
    },
    {
      what: 'what stays with something in its place',
      edit: settled({ ...name, decision: 'left' }),
      subject: 'Anna',
    },
    {
      what: 'a day that is none',
      edit: {
        kind: 'transcriptDescribed',
        transcript: 'harbour',
        from: { fileName: 'harbour.txt', details: harbour.details, facts: null },
        to: { fileName: 'harbour.txt', details: [], facts: { collected: 'May' } },
      },
      subject: 'May',
    },
    {
      what: 'to move a coding to another theme without what is known about that one',
      edit: {
        kind: 'codingRevised',
        transcript: 'harbour',
        coding: 'on-harbour',
        from: asItWas,
        to: { ...asItWas, theme: 'silence' },
      },
      subject: 'on-harbour',
    },
    {
      what: 'a draw that is scored from the start',
      edit: {
        kind: 'drawMade',
        draw: draw('d', { scored: { fit: 'first-fit', reader: 'reader-ada', at: '' } }),
      },
      subject: 'random draw d',
    },
    {
      what: 'evidence that JSON would not bring back',
      edit: {
        kind: 'evidenceGathered',
        fit: 'first-fit',
        what: 'steadiness',
        result: { themes: [{ steadiness: Number.NaN }] },
        before: null,
      },
      subject: 'steadiness',
    },
    { what: 'a setting that is not a number', edit: setting(NaN), subject: 'model.themes' },
    { what: 'an infinite setting', edit: setting(Infinity), subject: 'model.themes' },
    { what: 'an object for a setting', edit: setting({}), subject: 'model.themes' },
    { what: 'a list with a number in it', edit: setting(['a', 1]), subject: 'model.themes' },
    { what: 'a setting left undefined', edit: setting(undefined), subject: 'model.themes' },
    {
      what: 'a key that would change the object instead',
      edit: setting(['a'], '__proto__'),
      subject: '__proto__',
    },
    { what: 'a strength above 1', edit: made({ strength: 1.5 }), subject: 'new' },
    { what: 'a strength that is not a number', edit: made({ strength: NaN }), subject: 'new' },
  ],
  'word not seeded there': [
    {
      what: 'to take away a seed that is none',
      edit: { kind: 'wordUnseeded', theme: 'sea', word: 'flour' },
      subject: 'flour',
    },
  ],
  'word not shut out there': [
    {
      what: 'to let in a word that is not shut out',
      edit: { kind: 'wordLetIn', theme: 'sea', word: 'boat' },
      subject: 'boat',
    },
  ],
  'word seeded there': [
    {
      what: 'a seed twice',
      edit: { kind: 'wordSeeded', theme: 'sea', word: 'boat' },
      subject: 'boat',
    },
    {
      what: 'to shut a seed out',
      edit: { kind: 'wordShutOut', theme: 'sea', word: 'boat' },
      subject: 'boat',
    },
  ],
  'word shut out there': [
    {
      what: 'to shut a word out twice',
      edit: { kind: 'wordShutOut', theme: 'sea', word: 'flour' },
      subject: 'flour',
    },
    {
      what: 'a seed that is shut out',
      edit: { kind: 'wordSeeded', theme: 'sea', word: 'flour' },
      subject: 'flour',
    },
  ],
};

/** Has to do with the place in the trail and not with an edit: see undo.test.ts. */
const testedElsewhere: readonly RefusalCode[] = ['nothing to undo'];

describe('the table of refusals', () => {
  it('has a case for every code, and for no other', () => {
    expect(Object.keys(refusals).sort()).toEqual([...refusalCodes].sort());
    expect(refusalCodes.filter((code) => refusals[code].length === 0)).toEqual(testedElsewhere);
  });
});

for (const code of refusalCodes.filter((one) => !testedElsewhere.includes(one))) {
  describe(`with "${code}" a study refuses`, () => {
    for (const { what, before = island, edit, subject } of refusals[code]) {
      it(what, () => {
        frozen(before);
        const untouched = plainToTheLast(before);
        expect(apply(before, nextEntry(before, edit))).toEqual({ ok: false, code, subject });
        expect(plainToTheLast(before)).toEqual(untouched);
      });
    }
  });
}
