import {
  emptyDefinition,
  visibleThemes,
  type Definition,
  type Edit,
  type Theme,
} from '../../engine/study/index.ts';
import type { Api, Refused } from '../api.ts';
import { give, isRefused, refuse } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';
import { formFor, placeOf } from './theme-words.ts';

/** Decisions on themes and their words. What is so already is let be. */
export function themeDecisions(
  room: Room,
): Pick<
  Handlers,
  | 'nameTheme'
  | 'defineTheme'
  | 'addTheme'
  | 'pinTheme'
  | 'setThemeAside'
  | 'mergeThemes'
  | 'orderThemes'
  | 'seedWord'
  | 'shutOutWord'
> {
  return {
    nameTheme: room.decide((open, { theme, name }: Api['nameTheme']['takes']) =>
      withTheme(open, theme, ({ name: from }) => {
        const to = name.trim();
        return from === to ? [] : [{ kind: 'themeRenamed', theme, from, to }];
      }),
    ),

    defineTheme: room.decide((open, { theme, ...given }: Api['defineTheme']['takes']) =>
      withTheme(open, theme, ({ version, definition }) => {
        const { brief, full, whenToUse, whenNotToUse, examples } = given;
        const code = given.code.trim();
        const to: Definition = {
          ...(code === '' ? {} : { code }),
          brief,
          full,
          whenToUse,
          whenNotToUse,
          examples,
        };
        const same = (['code', ...Object.keys(emptyDefinition)] as (keyof Definition)[]).every(
          (part) => (definition[part] ?? '') === (to[part] ?? ''),
        );
        if (same) return [];
        return [
          {
            kind: 'themeDefined',
            theme,
            from: { version, definition },
            to: { version: version + 1, definition: to },
          },
        ];
      }),
    ),

    addTheme: room.look(async (open, takes: Api['addTheme']['takes']) => {
      const added = addTheme(open, takes);
      if (isRefused(added)) return added;
      const after = await room.afterwards(open);
      return isRefused(after) ? after : give({ overview: after.value, theme: added.theme });
    }),

    pinTheme: room.decide((open, { theme, pinned }: Api['pinTheme']['takes']) =>
      withTheme(open, theme, (current) =>
        current.pinned === pinned
          ? []
          : [{ kind: pinned ? 'themePinned' : 'themeUnpinned', theme }],
      ),
    ),

    setThemeAside: room.decide((open, { theme, aside }: Api['setThemeAside']['takes']) =>
      withTheme(open, theme, (current) =>
        current.setAside === aside
          ? []
          : [{ kind: aside ? 'themeSetAside' : 'themeBroughtBack', theme }],
      ),
    ),

    mergeThemes: room.decide((open, { into, from }: Api['mergeThemes']['takes']) =>
      open.decide([{ kind: 'themesMerged', into, from: [...new Set(from)] }]),
    ),

    orderThemes: room.decide(orderThemes),
    seedWord: room.decide(seedWord),
    shutOutWord: room.decide(shutOutWord),
  };
}

function withTheme(
  open: OpenStudy,
  id: string,
  edits: (theme: Theme) => readonly Edit[] | Refused,
): Refused | null {
  const theme = open.study.themes.get(id);
  if (theme === undefined) return open.refusal({ ok: false, code: 'unknown theme', subject: id });
  const found = edits(theme);
  return isRefused(found) ? found : open.decide(found);
}

function addTheme(
  open: OpenStudy,
  { name, byHand, seeds }: Api['addTheme']['takes'],
): { readonly theme: string } | Refused {
  if (byHand && seeds.length > 0) return refuse('seeds by hand');
  const words = new Map<string, string>();
  for (const seed of seeds) {
    const form = formFor(open.now, seed.trim());
    if (form === null) return refuse('not one word', seed);
    words.set(form, wordFor(open, seed));
  }
  const id = open.desk.context.mintId('theme');
  const theme: Theme = {
    id,
    name: name.trim(),
    origin: byHand ? 'by hand' : 'asked for',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  };
  const refused = open.decide([
    { kind: 'themeAdded', theme },
    ...[...words.values()].map((word): Edit => ({ kind: 'wordSeeded', theme: id, word })),
  ]);
  return refused ?? { theme: id };
}

/**
 * The themes given come to stand in their order in the places that they hold together; what is not
 * in the list (merged themes, candidates of other fits) keeps its place.
 */
function orderThemes(open: OpenStudy, { themes }: Api['orderThemes']['takes']): Refused | null {
  const asked = new Set(themes);
  const visible = new Set(visibleThemes(open.study).map(({ id }) => id));
  if (asked.size !== themes.length || themes.some((id) => !visible.has(id))) {
    return refuse('order out of date');
  }
  const from = [...open.study.themes.keys()];
  const next = themes.values();
  const to = from.map((id) => (asked.has(id) ? (next.next().value as string) : id));
  return to.every((id, place) => id === from[place])
    ? null
    : open.decide([{ kind: 'themesOrdered', from, to }]);
}

function seedWord(
  open: OpenStudy,
  { theme: id, word, seeded }: Api['seedWord']['takes'],
): Refused | null {
  return withTheme(open, id, ({ seeds, shutOut }) => {
    const known = sameWord(open, seeds, word);
    if (!seeded)
      return known === undefined ? [] : [{ kind: 'wordUnseeded', theme: id, word: known }];
    if (known !== undefined) return [];
    if (formFor(open.now, word.trim()) === null) return refuse('not one word', word);
    if (sameWord(open, shutOut, word) !== undefined) {
      return open.refusal({ ok: false, code: 'word shut out there', subject: word });
    }
    return [{ kind: 'wordSeeded', theme: id, word: wordFor(open, word) }];
  });
}

function shutOutWord(
  open: OpenStudy,
  { theme: id, word, shutOut: out }: Api['shutOutWord']['takes'],
): Refused | null {
  return withTheme(open, id, ({ seeds, shutOut }) => {
    const known = sameWord(open, shutOut, word);
    if (!out) return known === undefined ? [] : [{ kind: 'wordLetIn', theme: id, word: known }];
    if (known !== undefined) return [];
    if (formFor(open.now, word.trim()) === null) return refuse('not one word', word);
    if (sameWord(open, seeds, word) !== undefined) {
      return open.refusal({ ok: false, code: 'word seeded there', subject: word });
    }
    return [{ kind: 'wordShutOut', theme: id, word: wordFor(open, word) }];
  });
}

/** The stored word that is counted under the same form. */
function sameWord({ now }: OpenStudy, stored: readonly string[], word: string): string | undefined {
  const form = formFor(now, word.trim());
  return stored.find((each) => each === word || (form !== null && formFor(now, each) === form));
}

/**
 * The word as it is stored. A stem that came from the screen is stored as the word most often said
 * for it: a person reads that, and it leads back to the stem.
 */
function wordFor({ now }: OpenStudy, word: string): string {
  const typed = word.trim();
  const words = now.fitted?.words;
  if (!now.settings.text.stemming || words === undefined) return formFor(now, typed) ?? typed;
  const place = placeOf(words.vocabulary, typed);
  return place < 0 ? typed : (words.surfaces[place][0]?.form ?? typed);
}
