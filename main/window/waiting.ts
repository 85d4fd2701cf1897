import { isHeldBack, type Coding, type Edit } from '../../engine/study/index.ts';
import { defaultSettings } from '../../engine/themes/index.ts';
import type { StudyNow } from './study-now.ts';

/** Settings that a fit takes up, besides those that turn texts into words. */
const modelSettings = ['seed', 'alpha', 'eta'] as const;

/**
 * Decisions since the fit on screen that the next fit will take up, in words. What was decided and
 * then decided the other way round is no change and is left out.
 */
export function waitingInWords(now: StudyNow): string[] {
  const { since, fitted } = now;
  if (since === null || fitted === null) return [];
  const balance = new Map<string, { readonly of: Kind; count: number }>();
  const add = (of: Kind, subject: string, by: 1 | -1): void => {
    const key = `${of} ${subject}`;
    const known = balance.get(key) ?? { of, count: 0 };
    balance.set(key, known);
    known.count += by;
  };
  for (const { edit } of since.entries) weigh(edit, now, add);

  const gained = new Map<Kind, number>();
  const lost = new Map<Kind, number>();
  for (const { of, count } of balance.values()) {
    if (count > 0) gained.set(of, (gained.get(of) ?? 0) + 1);
    if (count < 0) lost.set(of, (lost.get(of) ?? 0) + 1);
  }
  const decided = kinds.flatMap(([kind, one, more, oneLost, moreLost]) => [
    ...phrase(gained.get(kind), one, more),
    ...phrase(lost.get(kind), oneLost, moreLost),
  ]);
  return [...decided, ...texts(now)];
}

function texts({ since, fitted, study }: StudyNow): string[] {
  if (since === null || fitted === null) return [];
  const was = new Set(fitted.words.passages.map(({ transcript }) => transcript));
  let added = 0;
  let removed = 0;
  let others = 0;
  for (const id of since.transcripts) {
    if (!study.transcripts.has(id)) removed++;
    else if (!was.has(id)) added++;
    else others++;
  }
  const then = fitted.fit.settings;
  const is = { ...defaultSettings, ...study.settings };
  const model = modelSettings.some((key) => then[key] !== is[key]);
  return [
    ...phrase(added, 'transcript added', 'transcripts added'),
    ...phrase(removed, 'transcript removed', 'transcripts removed'),
    ...phrase(others, 'transcript with other speakers', 'transcripts with other speakers'),
    ...(since.textSettings ? ['other settings for words and passages'] : []),
    ...(model ? ['other settings for the model'] : []),
  ];
}

type Kind =
  | 'seed'
  | 'shut out'
  | 'pin'
  | 'aside'
  | 'merge'
  | 'theme'
  | 'confirmed'
  | 'by hand'
  | 'rejected'
  | 'moved'
  | 'scored';

const kinds: readonly (readonly [Kind, string, string, string, string])[] = [
  ['theme', 'new theme', 'new themes', 'theme removed', 'themes removed'],
  ['merge', 'merge', 'merges', 'merge taken apart', 'merges taken apart'],
  ['aside', 'theme set aside', 'themes set aside', 'theme brought back', 'themes brought back'],
  ['pin', 'theme pinned', 'themes pinned', 'theme unpinned', 'themes unpinned'],
  ['seed', 'word seeded', 'words seeded', 'seed taken away', 'seeds taken away'],
  ['shut out', 'word shut out', 'words shut out', 'word let in again', 'words let in again'],
  [
    'confirmed',
    'coding confirmed',
    'codings confirmed',
    'confirmation removed',
    'confirmations removed',
  ],
  [
    'by hand',
    'coding by hand',
    'codings by hand',
    'coding by hand removed',
    'codings by hand removed',
  ],
  [
    'rejected',
    'suggestion rejected',
    'suggestions rejected',
    'rejection removed',
    'rejections removed',
  ],
  ['moved', 'coding moved', 'codings moved', 'coding moved', 'codings moved'],
  ['scored', 'cold sample scored', 'cold samples scored', 'score taken back', 'scores taken back'],
];

function phrase(count: number | undefined, one: string, more: string): string[] {
  if (count === undefined || count === 0) return [];
  return [`${count} ${count === 1 ? one : more}`];
}

type Add = (of: Kind, subject: string, by: 1 | -1) => void;

function weigh(edit: Edit, now: StudyNow, add: Add): void {
  switch (edit.kind) {
    case 'themeAdded':
    case 'themeRemoved':
      if (edit.theme.origin !== 'by hand') {
        add('theme', edit.theme.id, edit.kind === 'themeAdded' ? 1 : -1);
      }
      break;
    case 'themesMerged':
    case 'themesUnmerged':
      for (const from of edit.from) {
        add('merge', `${edit.into} ${from}`, edit.kind === 'themesMerged' ? 1 : -1);
      }
      break;
    case 'themeSetAside':
    case 'themeBroughtBack':
      add('aside', edit.theme, edit.kind === 'themeSetAside' ? 1 : -1);
      break;
    case 'themePinned':
    case 'themeUnpinned':
      add('pin', edit.theme, edit.kind === 'themePinned' ? 1 : -1);
      break;
    case 'wordSeeded':
    case 'wordUnseeded':
      add('seed', `${edit.theme} ${edit.word}`, edit.kind === 'wordSeeded' ? 1 : -1);
      break;
    case 'wordShutOut':
    case 'wordLetIn':
      add('shut out', `${edit.theme} ${edit.word}`, edit.kind === 'wordShutOut' ? 1 : -1);
      break;
    case 'codingRevised':
      if (edit.from.theme !== edit.to.theme) add('moved', edit.coding, 1);
      break;
    case 'drawScored':
      add('scored', edit.draw, edit.to === null ? -1 : 1);
      break;
    case 'codingMade':
    case 'codingRemoved':
      addCoding(edit.coding, now, add, edit.kind === 'codingMade' ? 1 : -1);
      break;
  }
}

/** A theme by hand has no part in the model, and a cold sample has none yet. */
function addCoding(coding: Coding, { study }: StudyNow, add: Add, by: 1 | -1) {
  const { id, theme, standing, transcript, span } = coding;
  if (study.themes.get(theme)?.origin === 'by hand') return;
  if (!isHeldBack(study, transcript, span)) add(standing, id, by);
}
