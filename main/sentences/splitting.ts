import type { SplitRefused } from '../splitting.ts';

const codes = {
  'split by hand': true,
  'split pinned': true,
  'split before a re-fit': true,
  'too small to split': true,
} satisfies Record<SplitRefused['code'], true>;

export function isSplitRefusal<Other extends { readonly code: string }>(
  refusal: Other,
): refusal is Extract<Other, SplitRefused> {
  return Object.hasOwn(codes, refusal.code);
}

/** Why a theme was not split; `label` is what it is called. */
export function sentenceForSplit(refusal: SplitRefused, label: string): string {
  switch (refusal.code) {
    case 'split by hand':
      return `“${label}” is coded by hand and has no words of its own to split by; add a second theme and code with that.`;
    case 'split pinned':
      return `“${label}” is pinned, so its words may not change; unpin it first, then split it.`;
    case 'split before a re-fit':
      return `Decisions on themes or texts wait for the next fit; re-fit first, then split “${label}”.`;
    case 'too small to split':
      return `“${label}” leads ${refusal.passages === 1 ? 'one passage' : `${refusal.passages} passages`} only, too few to split; read them and code by hand.`;
  }
}

/** Which half keeps the theme, and what that means for what was coded. */
export function keptHalfSentence(label: string, codings: number, elsewhere: number): string {
  if (codings === 0) {
    return `The first half keeps “${label}” with its name and seeds; the other is a new candidate.`;
  }
  const all = codings === 1 ? 'its coding' : `its ${codings} codings`;
  const moved =
    elsewhere === 0
      ? ''
      : ` ${elsewhere === 1 ? 'One of them is on a passage' : `${elsewhere} of them are on passages`} with more words of the new theme; look at ${elsewhere === 1 ? 'it' : 'them'} again.`;
  return `The half nearer to what was coded keeps “${label}” with its name, its seeds and ${all}; the other is a new candidate.${moved}`;
}
