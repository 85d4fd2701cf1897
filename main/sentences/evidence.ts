import type { EvidenceRefused } from '../../engine/evidence/index.ts';

export type EvidenceRefusal = EvidenceRefused | { readonly code: 'no fit yet' | 'stopped' };

const codes = {
  'no fit yet': true,
  'too few participants': true,
  'too many themes': true,
  stopped: true,
} satisfies Record<EvidenceRefusal['code'], true>;

export function isEvidenceRefusal<Other extends { readonly code: string }>(
  refusal: Other,
): refusal is Extract<Other, EvidenceRefusal> {
  return Object.hasOwn(codes, refusal.code);
}

/** Why evidence could not be gathered, and what to do. */
export function sentenceForEvidence(refusal: EvidenceRefusal): string {
  switch (refusal.code) {
    case 'no fit yet':
      return 'There is no fit to measure yet; fit the study from scratch first.';
    case 'too few participants':
      return (
        `${refusal.people === 1 ? 'One participant says' : `${refusal.people} participants say`} ` +
        `counted words, and at least ${refusal.least} are needed to leave some out in turn; ` +
        'add transcripts, or check in Gather who speaks.'
      );
    case 'too many themes':
      return (
        `${refusal.themes} themes are too many: without the participants who are left out, there are ` +
        `as few as ${refusal.passages} passages with counted words; ask for fewer themes, or add transcripts.`
      );
    case 'stopped':
      return 'It was stopped, so the study is as it was; start it again when you like.';
  }
}
