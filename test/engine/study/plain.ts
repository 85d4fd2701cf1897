import type { Study } from '../../../engine/study/index.ts';

/** A study as plain JSON values, to be compared and printed. Only themes and headings keep their order. */
export function plain(study: Study) {
  const {
    themes,
    headings,
    under,
    readers,
    transcripts,
    participants,
    memos,
    fits,
    draws,
    codings,
    nones,
  } = study;
  return {
    id: study.id,
    name: study.name,
    settings: study.settings,
    readers: sorted(readers),
    transcripts: sorted(transcripts),
    participants: sorted(participants),
    themes: [...themes],
    headings: [...headings],
    under: sorted(under),
    codings: sorted(codings).map(([id, inner]) => [id, sorted(inner)] as const),
    nones: sorted(nones).map(([id, inner]) => [id, sorted(inner)] as const),
    memos: sorted(memos),
    identifiers: sorted(study.identifiers),
    guide: study.guide,
    fits: sorted(fits),
    draws: sorted(draws),
    fit: study.fit,
    absentFits: [...study.absentFits].sort(),
    withdrawn: sorted(study.withdrawn),
    sealed: [...study.sealed].sort(),
    exported: study.exported,
    takenIn: study.takenIn,
  };
}

/** With what undo and redo reach, and with every order. */
export function plainToTheLast(study: Study) {
  return JSON.parse(
    JSON.stringify(study, (_key, value: unknown) =>
      value instanceof Map || value instanceof Set ? [...value] : value,
    ),
  ) as unknown;
}

function sorted<Value>(map: ReadonlyMap<string, Value>): (readonly [string, Value])[] {
  return [...map].sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0));
}

/** Makes every change to a value throw, in maps and everything inside as well. */
export function frozen<Value>(value: Value): Value {
  if (typeof value !== 'object' || value === null || Object.isFrozen(value)) return value;
  if (value instanceof Map) {
    const refuse = () => {
      throw new Error('a map of a study was changed in place');
    };
    Object.assign(value, { set: refuse, delete: refuse, clear: refuse });
    for (const inner of value.values()) frozen(inner);
  }
  Object.freeze(value);
  for (const inner of Object.values(value)) frozen(inner);
  return value;
}
