import { compareCodeUnits } from '../../engine/numbers/index.ts';
import type { Refused, ThemeSpread } from '../api.ts';
import { give } from './answers.ts';
import type { OpenStudy } from './open-study.ts';
import { spreadOf } from './spread.ts';
import { codedByTheme } from './theme-rows.ts';

const questionsShown = 12;

/** For whom a theme is told, attribute by attribute, and after which question. */
export function themeSpread(
  open: OpenStudy,
  { theme }: { readonly theme: string },
): { readonly value: ThemeSpread } | Refused {
  const { study, now } = open;
  if (!study.themes.has(theme)) {
    return open.refusal({ ok: false, code: 'unknown theme', subject: theme });
  }
  const column = now.themes.columnOf.get(theme);
  const spread = column === undefined ? undefined : spreadOf(open.desk, now.themes)[column];
  const coded = codedByTheme(open).get(theme)?.people ?? new Set<string>();
  const led = spread?.ledPeople ?? new Set<string>();
  return give({
    attributes: byAttribute(open, peopleOf(open), coded, led),
    questions: (spread?.questions ?? [])
      .slice(0, questionsShown)
      .map(({ text, share, people }) => ({ question: text, share, people })),
  });
}

/** Everybody who has a passage. */
function peopleOf({ now }: OpenStudy): ReadonlySet<string> {
  const people = new Set<string>();
  for (const { id } of now.transcripts) {
    for (const { participant } of now.passagesIn(id)) people.add(participant);
  }
  return people;
}

function byAttribute(
  { study }: OpenStudy,
  people: ReadonlySet<string>,
  coded: ReadonlySet<string>,
  led: ReadonlySet<string>,
): ThemeSpread['attributes'] {
  const names = new Set<string>();
  for (const id of people) {
    for (const name of Object.keys(study.participants.get(id)?.attributes ?? {})) names.add(name);
  }
  return [...names].map((name) => {
    const values = new Map<string | null, { people: number; coded: number; led: number }>();
    for (const id of people) {
      const attributes = study.participants.get(id)?.attributes ?? {};
      const value = Object.hasOwn(attributes, name) ? attributes[name] : null;
      const tally = values.get(value) ?? { people: 0, coded: 0, led: 0 };
      values.set(value, tally);
      tally.people++;
      if (coded.has(id)) tally.coded++;
      if (led.has(id)) tally.led++;
    }
    return {
      name,
      values: [...values]
        .map(([value, tally]) => ({ value, ...tally }))
        .sort((a, b) =>
          a.value === null ? 1 : b.value === null ? -1 : compareCodeUnits(a.value, b.value),
        ),
    };
  });
}
