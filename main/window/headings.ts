import type { Edit, Heading } from '../../engine/study/index.ts';
import type { Api, Refused } from '../api.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

/** Decisions on headings over themes. What is so already is let be. */
export function headingHandlers(
  room: Room,
): Pick<Handlers, 'addHeading' | 'changeHeading' | 'removeHeading' | 'putUnder'> {
  return {
    addHeading: room.decide((open, { name, themes }: Api['addHeading']['takes']) => {
      const heading: Heading = { id: open.desk.context.mintId('heading'), name: name.trim() };
      return open.decide([
        { kind: 'headingAdded', heading, place: null },
        ...[...new Set(themes)].flatMap((theme) => putting(open, theme, heading.id)),
      ]);
    }),

    changeHeading: room.decide((open, takes: Api['changeHeading']['takes']) => {
      const { heading: id, name, themes } = takes;
      const heading = open.study.headings.get(id);
      if (heading === undefined) return unknown(open, id);
      const to = name.trim();
      const leaving = [...open.study.under].flatMap(([theme, over]) =>
        over === id && isVisible(open, theme) && !themes.includes(theme) ? [theme] : [],
      );
      return open.decide([
        ...(to === heading.name
          ? []
          : [{ kind: 'headingRenamed', heading: id, from: heading.name, to } as const]),
        ...leaving.flatMap((theme) => putting(open, theme, null)),
        ...[...new Set(themes)].flatMap((theme) => putting(open, theme, id)),
      ]);
    }),

    removeHeading: room.decide((open, { heading: id }: Api['removeHeading']['takes']) => {
      const { headings, under } = open.study;
      const heading = headings.get(id);
      if (heading === undefined) return unknown(open, id);
      const place = [...headings.keys()].indexOf(id);
      return open.decide([
        ...[...under].flatMap(([theme, over]) => (over === id ? putting(open, theme, null) : [])),
        { kind: 'headingRemoved', heading, place },
      ]);
    }),

    putUnder: room.decide((open, { theme, heading }: Api['putUnder']['takes']) =>
      open.decide(putting(open, theme, heading)),
    ),
  };
}

/** A theme that was merged away goes where it came from when the merge is undone. */
function isVisible({ study }: OpenStudy, theme: string): boolean {
  return study.themes.get(theme)?.mergedInto === null;
}

function putting({ study }: OpenStudy, theme: string, to: string | null): Edit[] {
  const from = study.under.get(theme) ?? null;
  return from === to ? [] : [{ kind: 'themePutUnder', theme, from, to }];
}

function unknown(open: OpenStudy, id: string): Refused {
  return open.refusal({ ok: false, code: 'unknown heading', subject: id });
}
