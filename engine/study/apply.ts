import type { Edit, EditKind, Entry } from './edit.ts';
import { codingRules } from './edits/codings.ts';
import { copyRules } from './edits/copies.ts';
import { fieldNoteRules } from './edits/field-notes.ts';
import { drawRules } from './edits/draws.ts';
import { fitRules } from './edits/fits.ts';
import { forgettingRules } from './edits/forgetting.ts';
import { headingRules } from './edits/headings.ts';
import { guideRules } from './edits/guide.ts';
import { identifierRules } from './edits/identifiers.ts';
import { memoRules } from './edits/memos.ts';
import { participantRules } from './edits/participants.ts';
import type { Rule, Rules } from './edits/rule.ts';
import { studyRules } from './edits/study.ts';
import { themeRules } from './edits/themes.ts';
import { transcriptRules } from './edits/transcripts.ts';
import { wordRules } from './edits/words.ts';
import { historyAfter } from './history.ts';
import { refused, done, type Result } from './refusal.ts';
import { emptyStudy, type Study } from './study.ts';

const rules: Rules<EditKind> = {
  ...studyRules,
  ...transcriptRules,
  ...guideRules,
  ...identifierRules,
  ...participantRules,
  ...fieldNoteRules,
  ...themeRules,
  ...headingRules,
  ...wordRules,
  ...codingRules,
  ...memoRules,
  ...drawRules,
  ...fitRules,
  ...forgettingRules,
  ...copyRules,
};

/** Every kind of edit there is, in the order of the rules. */
export const editKinds = Object.keys(rules) as readonly EditKind[];

// The union guarantees that an edit meets the rule of its own kind; the type system cannot follow
// the index.
function ruleFor(kind: EditKind): Rule<EditKind> {
  return rules[kind] as unknown as Rule<EditKind>;
}

/**
 * The study after one more entry of the trail. Pure: mints no ids, reads no clock. Refuses an
 * impossible edit with a reason and leaves the study as it was.
 */
export function apply(study: Study, entry: Entry): Result<Study> {
  const { edit, sequence } = entry;
  if (!Number.isInteger(sequence) || sequence <= study.sequence) {
    throw new Error(
      `apply: entry.sequence is ${sequence}, but must be a whole number above ${study.sequence}`,
    );
  }
  if (!Object.hasOwn(rules, edit.kind)) {
    throw new Error(`apply: entry.edit.kind is ${JSON.stringify(edit.kind)}, which is no edit`);
  }
  if (study.id === '' && edit.kind !== 'studyStarted') return refused('study not started', '');
  const history = historyAfter(study, entry, inverse(edit) !== null);
  if (!history.ok) return history;
  const changed = ruleFor(edit.kind).apply(study, edit, entry.undoes !== undefined);
  if (!changed.ok) return changed;
  const left = closesTrail(edit.kind) ? { undo: null, redo: null } : history.value;
  return done({ ...changed.value, ...left, sequence });
}

/** Whether nothing up to and with an edit of this kind can be taken back: it erased something. */
export function closesTrail(kind: EditKind): boolean {
  return ruleFor(kind).closes === true;
}

/** The edit that takes `edit` back, or null where nothing can (the start of the study). */
export function inverse(edit: Edit): Edit | null {
  return ruleFor(edit.kind).inverse(edit);
}

/** The study that a whole trail describes. Stops at the first entry that cannot be applied. */
export function fold(entries: Iterable<Entry>): Result<Study> {
  let study = emptyStudy;
  for (const entry of entries) {
    const next = apply(study, entry);
    if (!next.ok) return next;
    study = next.value;
  }
  return done(study);
}
