import type { Speaker, Study, Transcript } from '../../engine/study/index.ts';
import { speakerKey } from '../../engine/text/index.ts';
import type { Talk } from './talk.ts';

/** What a person should look at in a transcript, one sentence each; empty where all is well. */
export function needsLook(
  study: Study,
  { speakers }: Transcript,
  talk: ReadonlyMap<string, Talk>,
): string[] {
  const found: string[] = [];
  const has = (role: Speaker['role']): boolean => speakers.some((one) => one.role === role);
  if (!has('participant')) {
    found.push('Nobody in it is a participant, so none of its words are counted');
  } else if (speakers.length === 1) {
    found.push('Only one speaker was found');
  } else if (!has('interviewer')) {
    found.push('No interviewer was recognised');
  }
  for (const [rare, common] of lookAlikes(speakers, talk)) {
    found.push(`“${rare}” may be a slip for “${common}”`);
  }
  found.push(...withoutAttributes(study, speakers));
  return found;
}

/** Pairs of labels that differ by a slip of typing, the one with fewer turns first. */
function lookAlikes(
  speakers: readonly Speaker[],
  talk: ReadonlyMap<string, Talk>,
): [string, string][] {
  const labels = speakers.flatMap(({ label }) => (label === null ? [] : [label]));
  const turns = (label: string): number => talk.get(speakerKey(label))?.turns ?? 0;
  return labels.flatMap((label, index) =>
    labels
      .slice(index + 1)
      .filter((other) => isSlip(label, other))
      .map((other): [string, string] =>
        turns(label) <= turns(other) ? [label, other] : [other, label],
      ),
  );
}

/** Codes ("P07", "P08") that differ in a figure are two people, however alike they look. */
function isSlip(a: string, b: string): boolean {
  const [one, other] = [plain(a), plain(b)];
  if (one === other) return true;
  if (figures(one) !== figures(other)) return false;
  return Math.min(one.length, other.length) >= 4 && isOneStepAway(one, other);
}

function plain(label: string): string {
  return label
    .normalize('NFC')
    .toLowerCase()
    .replace(/[^\p{L}\p{N}]+/gu, '')
    .replace(/0+(?=\p{N})/gu, '');
}

function figures(label: string): string {
  return label.replace(/\P{N}+/gu, ' ').trim();
}

/** One letter put in, left out, changed, or two neighbours swapped. */
function isOneStepAway(a: string, b: string): boolean {
  if (Math.abs(a.length - b.length) > 1) return false;
  let start = 0;
  while (start < a.length && a[start] === b[start]) start++;
  let end = 0;
  while (end < Math.min(a.length, b.length) - start && a.at(-1 - end) === b.at(-1 - end)) end++;
  const left = a.slice(start, a.length - end);
  const right = b.slice(start, b.length - end);
  if (left.length <= 1 && right.length <= 1) return true;
  return left.length === 2 && right.length === 2 && left[0] === right[1] && left[1] === right[0];
}

/** Only where others have attributes: a study without any lacks none. */
function withoutAttributes({ participants }: Study, speakers: readonly Speaker[]): string[] {
  const described = [...participants.values()].some(
    ({ attributes }) => Object.keys(attributes).length > 0,
  );
  if (!described) return [];
  const ids = new Set(speakers.flatMap(({ participant }) => participant ?? []));
  return [...ids].flatMap((id) => {
    const one = participants.get(id);
    return one === undefined || Object.keys(one.attributes).length > 0
      ? []
      : [`No attributes for ${one.name}`];
  });
}
