import type { Edit, EditKind, EditOf } from '../../engine/study/index.ts';

/** What an edit's ids are called. */
export interface Names {
  readonly theme: (id: string) => string;
  readonly transcript: (id: string) => string;
  readonly participant: (id: string) => string;
}

type Phrases = {
  readonly [Kind in EditKind]: (edit: EditOf<Kind>, names: Names) => string;
};

/** What each edit is, as a noun phrase: it stands after "Undo" and in the trail. */
const phrases: Phrases = {
  studyStarted: ({ name }) => `start of ${name}`,
  studyRenamed: ({ to }) => `rename of the study to ${to}`,
  settingsChanged: ({ changes }) =>
    changes.length === 1 ? `change of ${settingWords(changes[0].key)}` : 'change of settings',
  readerAdded: ({ reader }) => `reader ${reader.name}`,
  readerRemoved: ({ reader }) => `removal of reader ${reader.name}`,
  transcriptGathered: ({ transcript }) => `adding of ${transcript.name}`,
  transcriptRemoved: ({ transcript }) => `removal of ${transcript.name}`,
  transcriptRenamed: ({ to }) => `rename of ${to}`,
  speakersAssigned: ({ transcript }, names) => `speakers of ${names.transcript(transcript)}`,
  textRevised: ({ transcript }, names) => `correction of ${names.transcript(transcript)}`,
  transcriptDescribed: ({ transcript }, names) => `description of ${names.transcript(transcript)}`,
  guideRevised: () => 'change of the interview guide',
  turnsTagged: ({ transcript }, names) => `questions tagged in ${names.transcript(transcript)}`,
  identifierSettled: ({ from, to }) => {
    if (to === null) return `decision about ${from === null ? 'a name' : 'a name taken back'}`;
    if (to.replacement !== null) return `stand-in ${to.replacement}`;
    return to.decision === 'left' ? 'a name left as it is' : 'mark that something is no name';
  },
  participantAdded: ({ participant }) => `participant ${participant.name}`,
  participantRemoved: ({ participant }) => `removal of participant ${participant.name}`,
  participantDescribed: ({ to }) => `description of ${to.name}`,
  fieldNoteKept: ({ note }) => `field note ${note.name}`,
  fieldNoteLetGo: ({ note }) => `removal of field note ${note.name}`,
  fieldNoteDescribed: ({ to }) => `description of field note ${to.name}`,
  themeAdded: ({ theme }) => `new theme${theme.name === null ? '' : ` ${theme.name}`}`,
  themeRemoved: ({ theme }) => `removal of theme${theme.name === null ? '' : ` ${theme.name}`}`,
  themeRenamed: ({ from, to }) =>
    from === null ? `naming of ${to ?? 'a candidate'}` : `rename of ${to ?? from}`,
  themeDefined: ({ theme }, names) => `definition of ${names.theme(theme)}`,
  themePinned: ({ theme }, names) => `pin of ${names.theme(theme)}`,
  themeUnpinned: ({ theme }, names) => `unpinning of ${names.theme(theme)}`,
  themeSetAside: ({ theme }, names) => `setting aside of ${names.theme(theme)}`,
  themeBroughtBack: ({ theme }, names) => `bringing back of ${names.theme(theme)}`,
  themesMerged: ({ into }, names) => `merge into ${names.theme(into)}`,
  themesUnmerged: ({ into }, names) => `taking apart of ${names.theme(into)}`,
  themesOrdered: () => 'order of the themes',
  headingAdded: ({ heading }) => `heading ${heading.name}`,
  headingRemoved: ({ heading }) => `removal of the heading ${heading.name}`,
  headingRenamed: ({ to }) => `rename of the heading ${to}`,
  themePutUnder: ({ theme, to }, names) =>
    to === null
      ? `taking of ${names.theme(theme)} out from under its heading`
      : `putting of ${names.theme(theme)} under a heading`,
  wordSeeded: ({ theme, word }, names) => `seed “${word}” in ${names.theme(theme)}`,
  wordUnseeded: ({ theme, word }, names) => `unseeding of “${word}” in ${names.theme(theme)}`,
  wordShutOut: ({ theme, word }, names) => `shutting out of “${word}” from ${names.theme(theme)}`,
  wordLetIn: ({ theme, word }, names) => `letting in of “${word}” to ${names.theme(theme)}`,
  codingMade: ({ coding }, names) => {
    const theme = names.theme(coding.theme);
    if (coding.standing === 'confirmed') return `confirmation of ${theme}`;
    return coding.standing === 'rejected' ? `rejection of ${theme}` : `coding with ${theme}`;
  },
  codingRemoved: ({ coding }, names) => `removal of a coding with ${names.theme(coding.theme)}`,
  codingRevised: ({ from, to }, names) =>
    from.theme !== to.theme
      ? `move of a coding to ${names.theme(to.theme)}`
      : from.memo === to.memo
        ? `change of a coding with ${names.theme(to.theme)}`
        : `memo on a coding with ${names.theme(to.theme)}`,
  codingLookedAtAgain: ({ to }) => `keeping of a coding under wording ${to}`,
  noneMarked: () => 'mark that no theme applies',
  noneCleared: () => 'clearing of a mark that no theme applies',
  memoWritten: () => 'memo',
  memoErased: () => 'erasing of a memo',
  memoRevised: () => 'change of a memo',
  modelFitted: ({ fit: { start } }, names) => {
    if (start.split !== undefined) return `split of ${names.theme(start.split.theme)}`;
    return start.kind === 'warm' ? 're-fit' : 'fit from scratch';
  },
  drawMade: ({ draw }) => draw.name,
  drawRemoved: ({ draw }) => `removal of the ${draw.name}`,
  drawScored: ({ to }) =>
    to === null ? 'taking back of the score of the cold sample' : 'score of the cold sample',
  fitRemoved: () => 'removal of a fit',
  fitChosen: () => 'choice of a fit',
  fitRenamed: () => 'name of a fit',
  evidenceGathered: ({ what }) =>
    what === 'steadiness' ? 'measure of steadiness' : 'trial of numbers of themes',
  participantWithdrawn: () => 'withdrawal of a participant',
  originalsSealed: ({ transcripts }) =>
    `seal of the originals of ${transcripts.length} ${transcripts.length === 1 ? 'transcript' : 'transcripts'}`,
  fitsForgotten: ({ fits }) =>
    fits.length === 1
      ? 'erasing of a fit whose words are gone'
      : `erasing of ${fits.length} fits whose words are gone`,
  copyTakenIn: () => 'taking in of another copy',
  copyLetGo: () => 'letting go of another copy',
  reportExported: ({ report }) => `export of ${report.fileName}`,
};

/** Several edits of one kind in one gesture. */
const several: Partial<Record<EditKind, (count: number) => string>> = {
  transcriptGathered: (count) => `adding of ${count} transcripts`,
  transcriptRemoved: (count) => `removal of ${count} transcripts`,
  textRevised: (count) => `correction of ${count} transcripts`,
  identifierSettled: (count) => `decisions on ${count} names`,
  speakersAssigned: (count) => `speakers of ${count} transcripts`,
  fieldNoteKept: (count) => `${count} field notes`,
  participantDescribed: (count) => `attributes of ${count} participants`,
  wordSeeded: (count) => `${count} seed words`,
  themePutUnder: (count) => `move of ${count} themes`,
  codingMade: (count) => `${count} codings`,
  codingRemoved: (count) => `removal of ${count} codings`,
};

/**
 * Kinds that come along with others in one gesture, the least telling first; whatever is not named
 * here tells more.
 */
const alongside: readonly EditKind[] = [
  'readerRemoved',
  'readerAdded',
  'participantRemoved',
  'participantAdded',
  'participantDescribed',
  'fieldNoteLetGo',
  'fieldNoteKept',
  'settingsChanged',
  'themePutUnder',
  'noneCleared',
  'codingRemoved',
  'wordSeeded',
  'codingRevised',
  'memoRevised',
  'transcriptDescribed',
  'transcriptRenamed',
  'themeRenamed',
  'themeDefined',
  'speakersAssigned',
  'textRevised',
];

export function editInWords(edit: Edit, names: Names): string {
  // The union guarantees that an edit meets the phrase of its own kind.
  return (phrases[edit.kind] as (edit: Edit, names: Names) => string)(edit, names);
}

/** One gesture, by what it was made for. */
export function gestureInWords(edits: readonly Edit[], names: Names): string {
  const told = edits.reduce((most, edit) => (rank(edit) > rank(most) ? edit : most));
  const count = edits.filter(({ kind }) => kind === told.kind).length;
  const many = several[told.kind];
  return count > 1 && many !== undefined ? many(count) : editInWords(told, names);
}

function rank({ kind }: Edit): number {
  const place = alongside.indexOf(kind);
  return place < 0 ? alongside.length : place;
}

const settings: Readonly<Record<string, string>> = {
  themes: 'the number of themes',
  seed: 'the seed of fits',
  answer: 'the kind of fit',
  suggestionStrength: 'the strength from which a theme is suggested',
  followChanges: 'whether re-fits follow each change',
  suggestionCountedWords: 'the counted words that a suggestion needs',
  'text.language': 'the language',
  'text.passageMinimumWords': 'the shortest passage',
  'text.passageMaximumWords': 'the longest passage',
  'text.stemming': 'counting by stems',
  'text.leaveOutStopWords': 'the use of stop words',
  'text.leaveOutFillers': 'the use of fillers',
  'text.extraStopWords': 'the stop words',
  'text.keptWords': 'the kept words',
};

function settingWords(key: string): string {
  return Object.hasOwn(settings, key) ? settings[key] : 'a setting';
}
