import type { Detail, Turn } from '../spans/index.ts';
import { interviewerLabel } from './role-words.ts';
import { createWordScanner } from './words.ts';

/**
 * Who asks, as labels of the turns; a guess for a person to correct. Labels that say so decide
 * ("Interviewer", "INT", "Moderator" and their like), then the details ("Interviewer: Jane Doe"
 * above the talk, where "Jane Doe", "Jane" or "JD" speaks). Otherwise it is the one speaker who both asks
 * most (the largest share of turns with a question) and speaks less than an even share of the words;
 * at most one, and none where this is not clear. A sole speaker is an interviewer only by a whole
 * word for it.
 */
export function guessInterviewers(
  text: string,
  turns: readonly Turn[],
  details: readonly Detail[] = [],
): string[] {
  const speakers = talkOf(text, turns);
  const labels = [...speakers.keys()];
  const known = labels.filter((label) => {
    const says = interviewerLabel(label);
    return says === 'word' || (says === 'code' && labels.length > 1);
  });
  if (known.length > 0) return known;
  if (labels.length < 2) return [];
  const named = labels.filter((label) =>
    details.some(({ name, value }) => interviewerLabel(name) !== null && isNamed(label, value)),
  );
  if (named.length > 0 && named.length < labels.length) return named;

  const rates = labels.map((label) => {
    const talk = speakers.get(label)!;
    return { label, rate: talk.questions / talk.turns, ...talk };
  });
  const asks = rates.reduce((most, one) => (one.rate > most.rate ? one : most));
  const total = rates.reduce((sum, one) => sum + one.words, 0);
  const clear = rates.every((one) => one === asks || one.rate * 3 <= asks.rate * 2);
  const speaksLess = asks.words * labels.length < total;
  return asks.rate >= 0.25 && clear && speaksLess ? [asks.label] : [];
}

/** Whether a label is a full name, its first or last word, or its initials. */
function isNamed(label: string, fullName: string): boolean {
  const words = (fullName.toLowerCase().match(/[\p{L}\p{M}'’-]+/gu) ?? []) as string[];
  const given = (label.toLowerCase().match(/[\p{L}\p{M}'’-]+/gu) ?? []) as string[];
  if (given.length === 0) return false;
  const initials = words.map((word) => word.charAt(0)).join('');
  return (
    given.every((word) => words.includes(word)) || (words.length > 1 && given.join('') === initials)
  );
}

function talkOf(
  text: string,
  turns: readonly Turn[],
): Map<string, { turns: number; questions: number; words: number }> {
  const scan = createWordScanner('eng');
  const speakers = new Map<string, { turns: number; questions: number; words: number }>();
  for (const turn of turns) {
    if (turn.speaker === null) continue;
    const talk = speakers.get(turn.speaker) ?? { turns: 0, questions: 0, words: 0 };
    talk.turns++;
    if (/[?？؟]/.test(text.slice(turn.start, turn.end))) talk.questions++;
    scan(text, turn, () => talk.words++);
    speakers.set(turn.speaker, talk);
  }
  return speakers;
}
