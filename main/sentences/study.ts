import type { RefusalCode } from '../../engine/study/index.ts';

type Say = (subject: string) => string;

const quoted = (subject: string): string => `“${subject}”`;

/** Why an edit of the study cannot be made, and what to do instead. */
export const studySentences: Record<RefusalCode, Say> = {
  'already there': (s) => `${quoted(s)} is in the study already; use the one that is there.`,
  'changed since': (s) =>
    `${s === '' ? 'This' : quoted(s)} was changed in the meantime; look at it again, then decide.`,
  'code taken': (s) => `The code ${quoted(s)} is another theme’s; choose another one.`,
  'codings remain': (s) =>
    `${quoted(s)} still carries codings; remove them first, or keep the transcript.`,
  'empty name': () => 'A name may not be empty; type at least one letter.',
  'field notes remain': (s) =>
    `Field notes stand beside ${quoted(s)}; remove them first, or tie them to nothing.`,
  'fit is in use': () => 'This fit is on screen; choose another one first.',
  'heading in use': (s) =>
    `Themes still stand under ${quoted(s)}; take them out from under it first.`,
  'fitted already': () =>
    'The study was fitted before, so nobody could read a cold sample without knowing what was found; use a random draw.',
  'memos remain': (s) => `${quoted(s)} still carries memos; erase them first, or keep it.`,
  'merged theme': (s) =>
    `${quoted(s)} was merged into another theme; change that one, or undo the merge.`,
  'merge into itself': (s) =>
    `${quoted(s)} cannot be merged into itself; choose another theme to merge with it.`,
  'name taken': (s) => `The name ${quoted(s)} is taken; choose another one.`,
  'no speaker': (s) =>
    `The speaker ${quoted(s)} is missing from the list of speakers; assign every speaker a role.`,
  'not a participant': (s) =>
    `${quoted(s)} is not a participant’s label, so no person can be tied to it; change its role first.`,
  'nothing to undo': () =>
    'There is nothing left to take back here; look at the trail for what was decided.',
  'outside the text': (s) =>
    `The place lies outside the text of ${quoted(s)}; choose a start and an end within it.`,
  'question in use': (s) => `Turns are tagged with “${s}”; take the tags away before the question.`,
  'participant in use': (s) =>
    `${quoted(s)} still speaks in a transcript; assign those words to somebody else first.`,
  'reader in use': (s) =>
    `${quoted(s)} has made codings, so the name must stay in the trail; remove those codings first.`,
  'same as before': (s) => `${quoted(s)} is so already; choose something else, or leave it.`,
  'shut out everywhere': (s) =>
    `${quoted(s)} is shut out of every other theme, so it must stay in this one; to leave a word out altogether, add it to the stop words.`,
  'study not started': () => 'There is no study yet; start one first.',
  'study already started': (s) =>
    `The study ${quoted(s)} was started already; go on with it, or start a new file.`,
  'theme by hand': (s) =>
    `${quoted(s)} is a theme by hand, with no words of its own to seed, shut out or pin; code passages with it instead.`,
  'theme in use': (s) =>
    `${quoted(s)} has codings, a fit or a memo that refer to it; set it aside instead of removing it.`,
  'theme set aside': (s) => `${quoted(s)} is set aside; bring it back first.`,
  'unknown coding': () => 'That coding is not in the study any more; look at the passage again.',
  'unknown field note': (s) =>
    `The field note ${quoted(s)} is not in the study any more; look at the list again.`,
  'unknown draw': () => 'That draw is not in the study; draw the passages again.',
  'unknown fit': () => 'That fit is not in the study; choose one from the list of fits.',
  'unknown heading': () => 'That heading is not in the study any more; choose another one.',
  'unknown memo': () => 'That memo is not in the study any more; write a new one.',
  'unknown question': (s) => `The interview guide has no question “${s}”; look at the guide again.`,
  'unknown participant': (s) =>
    `${quoted(s)} is no participant of the study; choose one from the list, or add the person first.`,
  'unknown reader': (s) => `${quoted(s)} is no reader of the study; add the reader first.`,
  'unknown theme': (s) => `There is no theme ${quoted(s)} in the study; check the name or the id.`,
  'unknown transcript': (s) =>
    `There is no transcript ${quoted(s)} in the study; check the name in the list of transcripts.`,
  'unusable value': (s) =>
    `The value for ${quoted(s)} cannot be stored; give a number, a text or a list of words.`,
  'word not seeded there': (s) =>
    `${quoted(s)} is not seeded in this theme; check the list of its seeds.`,
  'word not shut out there': (s) =>
    `${quoted(s)} is not shut out of this theme; check the list of what is.`,
  'word seeded there': (s) =>
    `${quoted(s)} is seeded in this theme; take the seed away first to shut it out.`,
  'word shut out there': (s) =>
    `${quoted(s)} is shut out of this theme; let it in first to seed it.`,
};
