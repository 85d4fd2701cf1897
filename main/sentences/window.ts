type Say = (subject: string) => string;

const quoted = (subject: string): string => `“${subject}”`;

/** What only a window can ask for and cannot have: why, and what to do instead. */
export const windowSentences = {
  'wrong password': () =>
    'That is not the password; check capital letters and the keyboard’s language, then try again.',
  'no password': () => 'The study has no password yet; set one in the menu Study, under Password.',
  'no such idle time': () => 'That is no time that can be chosen; choose one from the list.',
  'no study': () => 'No study is open; start one, or open one.',
  'no dialog': () => 'The system’s file dialog cannot be shown here; type where the study is.',
  'no dialog to save': () =>
    'The system’s file dialog cannot be shown here; take the file from the browser instead.',
  'shown forward': (s) =>
    `${quoted(s)} is open in another window, which was brought forward; go on there, or close it first.`,
  'unfinished trail': (s) =>
    `${quoted(s)} holds decisions that do not follow from one another, so it was not opened; open a backup of it.`,
  'newer decisions': (s) =>
    `${quoted(s)} holds decisions of a newer version of Understory; install that version to open it.`,
  'reading only': () =>
    'The study is open for reading only, so no backup is needed; open it for writing first.',
  'no backups kept': () => 'No backups are kept; choose how many first.',
  'no such backup': (s) => `${quoted(s)} is no backup of this study; look at the list again.`,
  'no whole path': (s) =>
    `${quoted(s)} is not the whole path of a folder; type it from the top of the drive on.`,
  'closed meanwhile': (s) =>
    `${quoted(s)} was written anew and could not be opened again; open it once more.`,
  'no demo': () =>
    'The transcripts of the demo study could not be read; install Understory again, or start a study of your own.',
  'fit running': () => 'A fit is running already; wait for it, or stop it first.',
  'evidence running': () => 'The fit is being measured already; wait for it, or stop it first.',
  'no passages marked': () => 'No passages are marked; mark at least one for the theme.',
  'no fit': () => 'There is no fit yet; fit the study in Shape first.',
  'place changed': () =>
    'The passages were divided in another way in the meantime; open the passage again, then decide.',
  'cold sample there': (s) => `The ${s} was drawn already; read that one, or undo its draw first.`,
  'no cold sample': () =>
    'No cold sample was drawn in this study; choose another list, or use a random draw.',
  'cold sample unread': () =>
    'Nothing was decided in the cold sample yet; read some of it first, then score it.',
  'nothing to draw': () =>
    'There is no passage to draw from; add transcripts, or draw among passages that were read too.',
  'nothing to search': () => 'There is nothing to look for; type at least one word.',
  'moved rejection': () =>
    'A rejection cannot be moved to another theme; take it back, then code the passage.',
  'coded already': (s) =>
    `These words carry ${quoted(s)} already; remove one of the two codings first.`,
  'nothing selected': () => 'No words are selected; select at least one word to code.',
  'several speakers': () =>
    'The selection runs over several speakers; code each one’s words by themselves.',
  'no participant speaks': () =>
    'Only what participants say can be coded; select words of a participant.',
  'codings there': () =>
    'This passage carries codings; remove them first to say that no theme applies.',
  'part coded': (s) =>
    `A part of this passage is coded with ${quoted(s)}; remove that coding first to say that the theme does not apply.`,
  'too long': () =>
    'The text is longer than a million characters; divide it, or keep it in a file of its own.',
  'empty memo': () => 'The memo is empty; type something first.',
  'not one word': (s) => `${quoted(s)} is not one word; type a single word.`,
  'seeds by hand': () =>
    'A theme by hand has no words of its own; leave the seed words out, or let the model look for it.',
  'word not said': (s) =>
    `${quoted(s)} is not among the counted words; check its spelling, or the lists of words in Gather.`,
  'no attribute table': (s) =>
    `${quoted(s)} is no table of attributes; head its first column “participant” and each other column with an attribute.`,
  'no such table': () => 'That table is not waiting any more; add its file again.',
  'no answers': (s) =>
    `The columns chosen as text in ${quoted(s)} hold no words; choose at least one that does.`,
  'words of codings gone': (s) =>
    `Codings in ${quoted(s)} stand on words that the new file no longer has, so it was left as it is; keep both, or remove those codings first.`,
  'no codebook': (s) =>
    `${quoted(s)} is no codebook; give a table whose first row has a column “name”, or a .qdc file.`,
  'nothing to take in': () =>
    'Each of these themes is in the study already, so nothing was taken in; choose others.',
  'identifier gone': () =>
    'What was found changed in the meantime; look at the list again, then decide.',
  'no replacement': (s) =>
    `There is nothing to put in place of ${quoted(s)}; type a stand-in first.`,
  'no dates to move': () =>
    'No full date is left to move; decide on the others one by one, or leave them.',
  'no stand-ins': () => 'There are no stand-ins with names behind them; put some in first.',
  'key password': () =>
    'The password must have 8 to 1024 characters; type a longer one, and keep it apart from the file.',
  'no key file': (s) =>
    `${quoted(s)} is no key of stand-ins, or it is damaged; choose the file that was saved here.`,
  'key stays closed': (s) =>
    `${quoted(s)} does not open with this password; type it again, or use another copy of the file.`,
  'no files': () => 'No files were handed over; choose at least one.',
  'order out of date': () =>
    'The list of themes changed in the meantime; look at it again, then put it in order.',
  'erased for good': () =>
    'Something was erased for good, so nothing up to then can be taken back; go on from here.',
  'no chain hash': (s) =>
    `This is no hash of the chain; paste the ${s} to 64 digits from 0 to f that a report prints.`,
  'passage limits': () =>
    'The shortest passage must be shorter than the longest; change one of the two numbers.',
} satisfies Record<string, Say>;

export type WindowRefusalCode = keyof typeof windowSentences;
