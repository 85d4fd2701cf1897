import type { RefusalCode } from '../../engine/study/index.ts';

type Say = (subject: string) => string;

const quoted = (subject: string): string => `“${subject}”`;

/** Why an edit of the study cannot be made, and what to do instead. */
export const studySentences: Record<RefusalCode, Say> = {
  'already there': (s) => `${quoted(s)} is in the study already. Nothing was changed.`,
  'changed since': (s) =>
    `${s === '' ? 'This' : quoted(s)} was changed in the meantime. Look at it again, then decide.`,
  'codings remain': (s) =>
    `${quoted(s)} still carries codings. Remove them first, or keep the transcript.`,
  'empty name': () => 'A name may not be empty. Type at least one letter.',
  'fit is in use': () => 'This fit is on screen. Choose another one first.',
  'memos remain': (s) => `${quoted(s)} still carries memos. Erase them first, or keep it.`,
  'merged theme': (s) =>
    `${quoted(s)} was merged into another theme. Change that one, or undo the merge.`,
  'merge into itself': (s) =>
    `${quoted(s)} cannot be merged into itself. Choose another theme to merge with it.`,
  'name taken': (s) => `The name ${quoted(s)} is taken. Choose another one.`,
  'no speaker': (s) =>
    `The speaker ${quoted(s)} is missing from the list of speakers. Assign every speaker a role.`,
  'not a participant': (s) =>
    `${quoted(s)} is not a participant’s label, so no person can be tied to it. Change its role first.`,
  'nothing to undo': () => 'There is nothing left to take back here.',
  'outside the text': (s) =>
    `The place lies outside the text of ${quoted(s)}. Choose a start and an end within it.`,
  'participant in use': (s) =>
    `${quoted(s)} still speaks in a transcript. Assign those words to somebody else first.`,
  'reader in use': (s) => `${quoted(s)} has made codings, so the name must stay in the trail.`,
  'same as before': (s) => `${quoted(s)} is so already. Nothing was changed.`,
  'shut out everywhere': (s) =>
    `${quoted(s)} is shut out of every other theme, so it must stay in this one. To leave a word out altogether, add it to the stop words.`,
  'study not started': () => 'There is no study yet. Start one first.',
  'study already started': (s) => `The study ${quoted(s)} was started already.`,
  'theme by hand': (s) =>
    `${quoted(s)} is a theme by hand: it has no words of its own to seed, shut out or pin. Code passages with it instead.`,
  'theme in use': (s) =>
    `${quoted(s)} has codings, a fit or a memo that refer to it. Set it aside instead of removing it.`,
  'theme set aside': (s) => `${quoted(s)} is set aside. Bring it back first.`,
  'unknown coding': () => 'That coding is not in the study any more. Look at the passage again.',
  'unknown fit': () => 'That fit is not in the study. Choose one from the list of fits.',
  'unknown memo': () => 'That memo is not in the study any more.',
  'unknown participant': (s) =>
    `${quoted(s)} is no participant of the study. Choose one from the list, or add the person first.`,
  'unknown reader': (s) => `${quoted(s)} is no reader of the study. Add the reader first.`,
  'unknown theme': (s) => `There is no theme ${quoted(s)} in the study. Check the name or the id.`,
  'unknown transcript': (s) =>
    `There is no transcript ${quoted(s)} in the study. Check the name in the list of transcripts.`,
  'unusable value': (s) =>
    `The value for ${quoted(s)} cannot be stored. Give a number, a text or a list of words.`,
  'word not seeded there': (s) => `${quoted(s)} is not seeded in this theme. Nothing was changed.`,
  'word not shut out there': (s) =>
    `${quoted(s)} is not shut out of this theme. Nothing was changed.`,
  'word seeded there': (s) =>
    `${quoted(s)} is seeded in this theme. Take the seed away first to shut it out.`,
  'word shut out there': (s) =>
    `${quoted(s)} is shut out of this theme. Let it in first to seed it.`,
};
