import type { Edit, Study, Theme } from '../../../engine/study/index.ts';
import type { Span } from '../../../engine/spans/index.ts';
import { offsetAmong, reworded, spanAmong, type Rewording } from '../spans/marked-text.ts';
import { coding, draw, fit, memo, none, theme } from './scene.ts';

/** A decision about a stretch of a transcript, as the model keeps it. */
interface Decided {
  at: string;
  start: number;
  end: number;
  reader: string;
  theme?: string;
  standing?: string;
  fit?: string | null;
}

/** A study as plainly as can be: lists and records, changed in place, copied whole for undo. */
export interface World {
  name: string;
  settings: Record<string, number>;
  readers: string[];
  participants: string[];
  transcripts: Record<string, { name: string; length: number; blob: number; whose: string | null }>;
  themes: {
    id: string;
    name: string | null;
    origin: Theme['origin'];
    pinned: boolean;
    aside: boolean;
    into: string | null;
    seeds: string[];
    shutOut: string[];
  }[];
  codings: Record<string, Decided>;
  nones: Record<string, Decided>;
  memos: Record<string, Decided>;
  /** By the id under which a draw's one place is moved. */
  draws: Record<string, Decided>;
  fits: Record<string, { themes: string[]; from: string | null; found: string }>;
  fit: string | null;
}

export const newWorld = (): World => ({
  name: 'The island',
  settings: {},
  readers: [],
  participants: [],
  transcripts: {},
  themes: [],
  codings: {},
  nones: {},
  memos: {},
  draws: {},
  fits: {},
  fit: null,
});

/** The same view of a real study. */
export function worldOf(study: Study): World {
  const decided = (
    id: string,
    { transcript, span, under }: ReturnType<typeof none>,
  ): [string, Decided] => [id, { at: transcript, ...span, reader: under.reader, fit: under.fit }];
  return {
    name: study.name,
    settings: study.settings as Record<string, number>,
    readers: [...study.readers.keys()].sort(),
    participants: [...study.participants.keys()].sort(),
    transcripts: Object.fromEntries(
      [...study.transcripts.values()].map(({ id, name, length, text, speakers }) => [
        id,
        { name, length, blob: text.sequence, whose: speakers[0]!.participant },
      ]),
    ),
    themes: [...study.themes.values()].map((each) => ({
      id: each.id,
      name: each.name,
      origin: each.origin,
      pinned: each.pinned,
      aside: each.setAside,
      into: each.mergedInto,
      seeds: [...each.seeds],
      shutOut: [...each.shutOut],
    })),
    codings: Object.fromEntries(
      [...study.codings.values()].flatMap((inner) =>
        [...inner.values()].map((one) => {
          const [id, rest] = decided(one.id, one);
          return [id, { ...rest, theme: one.theme, standing: one.standing }];
        }),
      ),
    ),
    nones: Object.fromEntries(
      [...study.nones.values()].flatMap((inner) =>
        [...inner.values()].map((one) => decided(one.id, one)),
      ),
    ),
    memos: Object.fromEntries(
      [...study.memos.values()].map(({ id, subject, reader }) => {
        if (subject.kind !== 'passage') throw new Error('the model writes memos on passages only');
        return [id, { at: subject.transcript, ...subject.span, reader }];
      }),
    ),
    draws: Object.fromEntries(
      [...study.draws.values()].map(({ id, places: [place], reader }) => [
        `${id} 0`,
        { at: place!.transcript, ...place!.span, reader },
      ]),
    ),
    fits: Object.fromEntries(
      [...study.fits.values()].map(({ id, themes, start }) => [
        id,
        { themes: [...themes], from: start.from, found: themes.at(-1)! },
      ]),
    ),
    fit: study.fit,
  };
}

/** Small numbers that an attempt makes its choices from. */
export interface Choices {
  readonly a: number;
  readonly b: number;
  readonly c: number;
  readonly d: number;
  /** A number that no earlier attempt had, for ids of what a fit makes. */
  readonly fresh: number;
}

/** An edit, whether the world as it stands allows it, and what it changes there. */
export interface Attempt {
  readonly edit: Edit;
  readonly allowed: boolean;
  readonly act: () => void;
}

type Try = (world: World, choices: Choices) => Attempt;

const readerIds = ['ada', 'bo'];
const participantIds = ['maren', 'tove'];
const transcriptIds = ['harbour', 'mill', 'quay'];
const themeIds = ['sea', 'work', 'kin', 'silence'];
const themeNames = ['Sea', 'sea ', 'Work', 'Kin', 'Silence', ' '];
const words = ['boat', 'flour', 'tide'];

const pick = <Item>(items: readonly Item[], number: number): Item => items[number % items.length]!;
const without = (list: string[], item: string) => list.filter((other) => other !== item);
const same = (a: string | null, b: string) =>
  a !== null && a.trim().toLowerCase() === b.trim().toLowerCase();

const find = (world: World, id: string) => world.themes.find((each) => each.id === id);
const inModel = (each: World['themes'][number]) =>
  each.origin !== 'by hand' && !each.aside && each.into === null;

function nameIsFree(world: World, name: string, except: string[]): boolean {
  return (
    name.trim() !== '' &&
    !world.themes.some(
      (other) => other.into === null && !except.includes(other.id) && same(other.name, name),
    )
  );
}

function fullTheme(each: World['themes'][number]): Theme {
  const { id, name, origin, pinned, seeds, shutOut } = each;
  return theme(id, {
    name,
    origin,
    pinned,
    setAside: each.aside,
    mergedInto: each.into,
    seeds: [...seeds],
    shutOut: [...shutOut],
  });
}

function fullTranscript(id: string, { name, length, blob, whose }: World['transcripts'][string]) {
  return {
    id,
    name,
    source: { fileName: `${id}.txt`, format: 'text', hash: id },
    text: { sequence: blob, bytes: length },
    length,
    details: [],
    turns: wholeTurn(length),
    speakers: speakersOf(whose),
  };
}

function wholeTurn(length: number) {
  return [{ start: 0, end: length, speaker: null, startTime: null, endTime: null }];
}

function speakersOf(whose: string | null) {
  return [
    {
      label: null,
      role: whose === null ? ('other' as const) : ('participant' as const),
      participant: whose,
    },
  ];
}

function fullUnder(decided: Decided) {
  return { ...coding('any').under, reader: decided.reader, fit: decided.fit ?? null };
}

function fullCoding(id: string, decided: Decided) {
  const { at, start, end, theme: of, standing } = decided;
  return coding(id, {
    transcript: at,
    span: { start, end },
    theme: of!,
    standing: standing as 'confirmed',
    under: fullUnder(decided),
  });
}

function fullNone(id: string, decided: Decided) {
  const { at, start, end } = decided;
  return none(id, { transcript: at, span: { start, end }, under: fullUnder(decided) });
}

function fullMemo(id: string, { at, start, end, reader }: Decided) {
  const subject = { kind: 'passage' as const, transcript: at, span: { start, end } };
  return { ...memo(id, subject), reader };
}

function fullFit(id: string, { themes, from }: World['fits'][string]) {
  return fit(id, {
    themes: [...themes],
    start: { kind: from === null ? 'fresh' : 'warm', seed: 1, from },
  });
}

function fullDraw(id: string, { at, start, end, reader }: Decided) {
  return draw(id, { places: [{ transcript: at, span: { start, end } }], reader });
}

const isUsed = (world: World, id: string) =>
  world.themes.some((each) => each.into === id) ||
  Object.values(world.fits).some(({ themes }) => themes.includes(id)) ||
  Object.values(world.codings).some((each) => each.theme === id);

/** Somewhere on a transcript; sometimes empty, or past its end. */
function somewhere(world: World, { a, b, c }: Choices): { at: string } & Span & { fits: boolean } {
  const at = pick(transcriptIds, a);
  const length = world.transcripts[at]?.length ?? 10;
  const start = b % (length + 1);
  const end = start + (c % 9);
  return { at, start, end, fits: at in world.transcripts && start < end && end <= length };
}

function decisionAt(world: World, choices: Choices): Decided & { allowed: boolean } {
  const { at, start, end, fits } = somewhere(world, choices);
  const reader = pick(readerIds, choices.d);
  return { at, start, end, reader, allowed: fits && world.readers.includes(reader) };
}

function stored({ at, start, end, reader }: Decided): Decided {
  return { at, start, end, reader };
}

/** Every way in which the sequences try to change a study. */
export const tries: Readonly<Record<string, Try>> = {
  rename: (world, { a }) => {
    const to = pick(['Skarvoy', 'Nes', ''], a);
    return {
      edit: { kind: 'studyRenamed', from: world.name, to },
      allowed: to !== '',
      act: () => void (world.name = to),
    };
  },

  set: (world, { a, b }) => {
    const key = pick(['model.themes', 'text.stemming'], a);
    const to = pick([1, 2, null], b);
    return {
      edit: {
        kind: 'settingsChanged',
        changes: [{ key, from: world.settings[key] ?? null, to }],
      },
      allowed: true,
      act: () => {
        if (to === null) delete world.settings[key];
        else world.settings[key] = to;
      },
    };
  },

  addReader: (world, { a }) => {
    const id = pick(readerIds, a);
    return {
      edit: { kind: 'readerAdded', reader: { id, name: id } },
      allowed: !world.readers.includes(id),
      act: () => void world.readers.push(id),
    };
  },

  removeReader: (world, { a }) => {
    const id = pick(readerIds, a);
    const decisions = [world.codings, world.nones, world.memos, world.draws].flatMap((all) =>
      Object.values(all),
    );
    return {
      edit: { kind: 'readerRemoved', reader: { id, name: id } },
      allowed: world.readers.includes(id) && !decisions.some(({ reader }) => reader === id),
      act: () => void (world.readers = without(world.readers, id)),
    };
  },

  addParticipant: (world, { a }) => {
    const id = pick(participantIds, a);
    return {
      edit: { kind: 'participantAdded', participant: { id, name: id, attributes: {} } },
      allowed: !world.participants.includes(id),
      act: () => void world.participants.push(id),
    };
  },

  removeParticipant: (world, { a }) => {
    const id = pick(participantIds, a);
    return {
      edit: { kind: 'participantRemoved', participant: { id, name: id, attributes: {} } },
      allowed:
        world.participants.includes(id) &&
        !Object.values(world.transcripts).some(({ whose }) => whose === id),
      act: () => void (world.participants = without(world.participants, id)),
    };
  },

  gather: (world, { a, b, c, fresh }) => {
    const id = pick(transcriptIds, a);
    const name = pick(transcriptIds, b % 4 === 0 ? b : a);
    const transcript = { name, length: 5 + (c % 20), blob: fresh, whose: null };
    return {
      edit: { kind: 'transcriptGathered', transcript: fullTranscript(id, transcript) },
      allowed:
        !(id in world.transcripts) &&
        !Object.values(world.transcripts).some((other) => other.name === name),
      act: () => void (world.transcripts[id] = transcript),
    };
  },

  discard: (world, { a }) => {
    const one = pick(transcriptIds, a);
    // What was drawn outlives its transcript; a new one of that id would be no study's doing.
    const drawn = Object.values(world.draws).some(({ at }) => at === one);
    const id = drawn ? 'nowhere' : one;
    const current = world.transcripts[id];
    const decisions = [world.codings, world.nones, world.memos].flatMap((all) =>
      Object.values(all),
    );
    return {
      edit: {
        kind: 'transcriptRemoved',
        transcript: fullTranscript(id, current ?? { name: id, length: 5, blob: 0, whose: null }),
      },
      allowed: current !== undefined && !decisions.some(({ at }) => at === id),
      act: () => void delete world.transcripts[id],
    };
  },

  assign: (world, { a, b }) => {
    const id = pick(transcriptIds, a);
    const current = world.transcripts[id];
    const to = pick([...participantIds, null], b);
    return {
      edit: {
        kind: 'speakersAssigned',
        transcript: id,
        from: speakersOf(current?.whose ?? null),
        to: speakersOf(to),
      },
      allowed: current !== undefined && (to === null || world.participants.includes(to)),
      act: () => void (current!.whose = to),
    };
  },

  reword: (world, { a, b, c, d, fresh }) => {
    const id = pick(transcriptIds, a);
    const current = world.transcripts[id] ?? { name: id, length: 5, blob: 0, whose: null };
    const rewordings: Rewording[] = [];
    let at = 0;
    for (const [gap, removed, put] of [
      [b % 7, c % 5, d % 4],
      [d % 5, b % 4, c % 6],
    ] as const) {
      const start = Math.min(current.length, at + gap);
      const end = Math.min(current.length, start + removed);
      rewordings.push({ start, end, inserted: put, words: 'y'.repeat(put) });
      at = end;
    }
    const marks = reworded('x'.repeat(current.length), rewordings);
    const here = [world.codings, world.nones, world.memos, world.draws].flatMap((all) =>
      Object.entries(all).filter(([, decided]) => decided.at === id),
    );
    const forgets = d % 7 === 6 && here.length > 0;
    const placed = b % 5 === 4 && here.length > 0 ? [pick(here, c)[0]] : [];
    const place = { start: 0, end: Math.min(1, marks.length) };
    return {
      edit: {
        kind: 'textRevised',
        transcript: id,
        from: {
          text: { sequence: current.blob, bytes: current.length },
          length: current.length,
          turns: wholeTurn(current.length),
        },
        to: {
          text: { sequence: fresh, bytes: marks.length },
          length: marks.length,
          turns: wholeTurn(marks.length),
        },
        replacements: rewordings.map(({ start, end, inserted }) => ({ start, end, inserted })),
        placed: placed.map((one) => ({ id: one, span: place })),
        // More than needed does no harm; what is remembered wrongly has to be refused.
        lost: here.map(([one, { start, end }]) => ({
          id: one,
          span: { start, end: forgets ? end + 1 : end },
        })),
      },
      allowed: id in world.transcripts && !forgets,
      act: () => {
        Object.assign(current, { length: marks.length, blob: fresh });
        for (const [one, decided] of here) {
          Object.assign(decided, placed.includes(one) ? place : moved(marks, decided));
        }
      },
    };
  },

  addTheme: (world, { a, b, c, d }) => {
    const id = pick(themeIds, a);
    const name = pick(themeNames, b % 3 === 0 ? b : a);
    const origin = id === 'silence' ? 'by hand' : 'asked for';
    const place = c % 2 === 0 ? null : d % (world.themes.length + 1);
    const added = {
      id,
      name,
      origin,
      pinned: false,
      aside: false,
      into: null,
      seeds: [],
      shutOut: [],
    } as const;
    return {
      edit: { kind: 'themeAdded', theme: theme(id, { name, origin }), place },
      allowed: find(world, id) === undefined && nameIsFree(world, name, []),
      act: () =>
        void world.themes.splice(place ?? world.themes.length, 0, structuredClone(added) as never),
    };
  },

  removeTheme: (world, { a }) => {
    const id = pick(themeIds, a);
    const place = world.themes.findIndex((each) => each.id === id);
    return {
      edit: {
        kind: 'themeRemoved',
        theme: place < 0 ? theme(id) : fullTheme(world.themes[place]!),
        place,
      },
      allowed: place >= 0 && !isUsed(world, id),
      act: () => void world.themes.splice(place, 1),
    };
  },

  renameTheme: (world, { a, b }) => {
    const { id, name, into, origin } = themeOrNone(world, a);
    const to = pick([...themeNames, null], b);
    return {
      edit: { kind: 'themeRenamed', theme: id, from: name, to },
      allowed:
        find(world, id) !== undefined &&
        into === null &&
        (to === null ? origin === 'fitted' : nameIsFree(world, to, [id])),
      act: () => void (find(world, id)!.name = to),
    };
  },

  flag: (world, { a, b }) => {
    const each = themeOrNone(world, a);
    const kinds = ['themePinned', 'themeUnpinned', 'themeSetAside', 'themeBroughtBack'] as const;
    const kind = pick(kinds, b);
    const can = {
      themePinned: inModel(each) && !each.pinned,
      themeUnpinned: each.pinned,
      themeSetAside: !each.aside,
      themeBroughtBack: each.aside,
    };
    return {
      edit: { kind, theme: each.id },
      allowed: world.themes.includes(each) && each.into === null && can[kind],
      act: () => {
        if (kind === 'themePinned' || kind === 'themeUnpinned') {
          each.pinned = kind === 'themePinned';
        } else {
          each.aside = kind === 'themeSetAside';
        }
      },
    };
  },

  merge: (world, { a, b, c }) => {
    const into = themeOrNone(world, a);
    const from = [...new Set([themeOrNone(world, b), themeOrNone(world, c)])];
    const stands = (each: World['themes'][number]) =>
      world.themes.includes(each) && each.into === null && !each.aside;
    return {
      edit: { kind: 'themesMerged', into: into.id, from: from.map(({ id }) => id) },
      allowed:
        stands(into) &&
        from.every(
          (each) =>
            each !== into &&
            stands(each) &&
            (into.origin !== 'by hand' || each.origin === 'by hand'),
        ),
      act: () => {
        for (const each of from) each.into = into.id;
      },
    };
  },

  unmerge: (world, { a, b }) => {
    const each = themeOrNone(world, a);
    const into = b % 5 === 0 ? 'sea' : (each.into ?? 'work');
    return {
      edit: { kind: 'themesUnmerged', into, from: [each.id] },
      allowed:
        each.into === into && (each.name === null || nameIsFree(world, each.name, [each.id])),
      act: () => void (each.into = null),
    };
  },

  order: (world, { a, b }) => {
    const from = world.themes.map(({ id }) => id);
    const to = [...from];
    to.splice(b % (to.length + 1), 0, ...to.splice(a % (to.length + 1), 1));
    return {
      edit: { kind: 'themesOrdered', from, to },
      allowed: true,
      act: () => void world.themes.sort((one, two) => to.indexOf(one.id) - to.indexOf(two.id)),
    };
  },

  word: (world, { a, b, c }) => {
    const each = themeOrNone(world, a);
    const word = pick(words, b);
    const kind = pick(['wordSeeded', 'wordUnseeded', 'wordShutOut', 'wordLetIn'] as const, c);
    const free = !each.seeds.includes(word) && !each.shutOut.includes(word);
    const others = world.themes.filter(
      (other) =>
        other !== each &&
        inModel(other) &&
        (other.origin === 'asked for' || world.fits[world.fit ?? '']?.themes.includes(other.id)),
    );
    const leavesNone = world.fit !== null && others.every((other) => other.shutOut.includes(word));
    const can = {
      wordSeeded: inModel(each) && free,
      wordUnseeded: each.seeds.includes(word),
      wordShutOut: inModel(each) && free && !leavesNone,
      wordLetIn: each.shutOut.includes(word),
    };
    return {
      edit: { kind, theme: each.id, word },
      allowed: world.themes.includes(each) && each.into === null && can[kind],
      act: () => {
        if (kind === 'wordSeeded') each.seeds = [...each.seeds, word].sort();
        if (kind === 'wordUnseeded') each.seeds = without(each.seeds, word);
        if (kind === 'wordShutOut') each.shutOut = [...each.shutOut, word].sort();
        if (kind === 'wordLetIn') each.shutOut = without(each.shutOut, word);
      },
    };
  },

  code: (world, choices) => {
    const { allowed, ...decided } = decisionAt(world, choices);
    const of = themeOrNone(world, choices.b + choices.d);
    const id = `coding ${choices.c % 4} on ${decided.at}`;
    const full = { ...stored(decided), theme: of.id, standing: 'confirmed', fit: world.fit };
    return {
      edit: { kind: 'codingMade', coding: fullCoding(id, full) },
      allowed: allowed && world.themes.includes(of) && of.into === null && !(id in world.codings),
      act: () => void (world.codings[id] = full),
    };
  },

  uncode: (world, { a, b }) => {
    const [id, decided] = oneOf(world.codings, a) ?? ['gone', gone];
    const stale = b % 6 === 0;
    const current = fullCoding(id, decided);
    return {
      edit: { kind: 'codingRemoved', coding: stale ? { ...current, memo: 'other' } : current },
      allowed: decided !== gone && !stale,
      act: () => void delete world.codings[id],
    };
  },

  recode: (world, choices) => {
    const [id, decided] = oneOf(world.codings, choices.a) ?? ['gone', gone];
    const of = themeOrNone(world, choices.d);
    const standing = pick(['rejected', 'by hand'] as const, choices.b);
    const length = world.transcripts[decided.at]?.length ?? 0;
    const to =
      choices.c % 2 === 0
        ? { start: decided.start, end: decided.end }
        : { start: 0, end: choices.b % 12 };
    const from = fullCoding(id, decided);
    const { under, strength, codebookVersion } = from;
    const known = of.id === decided.theme ? {} : { known: { under, strength, codebookVersion } };
    const keepsSpan = to.start === decided.start && to.end === decided.end;
    return {
      edit: {
        kind: 'codingRevised',
        transcript: decided.at,
        coding: id,
        from: { theme: from.theme, standing: from.standing, span: from.span, memo: '', ...known },
        to: { theme: of.id, standing, span: to, memo: '', ...known },
      },
      allowed:
        decided !== gone &&
        (keepsSpan || (to.start < to.end && to.end <= length)) &&
        (of.id === decided.theme || (world.themes.includes(of) && of.into === null)),
      act: () => void Object.assign(decided, to, { theme: of.id, standing }),
    };
  },

  mark: (world, choices) => {
    const { allowed, ...decided } = decisionAt(world, choices);
    const id = `none ${choices.d % 3} on ${decided.at}`;
    const full = { ...stored(decided), fit: world.fit };
    return {
      edit: { kind: 'noneMarked', none: fullNone(id, full) },
      allowed: allowed && !(id in world.nones),
      act: () => void (world.nones[id] = full),
    };
  },

  clear: (world, { a }) => {
    const [id, decided] = oneOf(world.nones, a) ?? ['gone', gone];
    return {
      edit: { kind: 'noneCleared', none: fullNone(id, decided) },
      allowed: decided !== gone,
      act: () => void delete world.nones[id],
    };
  },

  note: (world, choices) => {
    const { allowed, ...decided } = decisionAt(world, choices);
    const id = `memo ${choices.b % 4}`;
    return {
      edit: { kind: 'memoWritten', memo: fullMemo(id, decided) },
      allowed: allowed && !(id in world.memos),
      act: () => void (world.memos[id] = stored(decided)),
    };
  },

  erase: (world, { a }) => {
    const [id, decided] = oneOf(world.memos, a) ?? ['gone', gone];
    return {
      edit: { kind: 'memoErased', memo: fullMemo(id, decided) },
      allowed: decided !== gone,
      act: () => void delete world.memos[id],
    };
  },

  draw: (world, choices) => {
    const { allowed, ...at } = decisionAt(world, choices);
    // A draw may name a transcript that is gone; here it is tried by nobody instead.
    const decided = at.at in world.transcripts ? at : { ...at, reader: 'nobody' };
    const id = `draw ${choices.b % 4}`;
    return {
      edit: { kind: 'drawMade', draw: fullDraw(id, decided) },
      allowed: allowed && !(`${id} 0` in world.draws),
      act: () => void (world.draws[`${id} 0`] = stored(decided)),
    };
  },

  forget: (world, { a }) => {
    const [id, decided] = oneOf(world.draws, a) ?? ['gone 0', gone];
    return {
      edit: { kind: 'drawRemoved', draw: fullDraw(id.slice(0, -2), decided) },
      allowed: decided !== gone,
      act: () => void delete world.draws[id],
    };
  },

  fit: (world, { a, b, fresh }) => {
    const found = `found ${fresh}`;
    const id = `fit ${fresh}`;
    const themes = world.themes.filter((each) => inModel(each) || a % 6 === 0);
    const made = {
      themes: [...themes.map((each) => each.id), found],
      from: b % 2 === 0 ? null : world.fit,
      found,
    };
    const candidate = theme(found, { name: null, origin: 'fitted' });
    return {
      edit: {
        kind: 'modelFitted',
        fit: fullFit(id, made),
        found: [candidate],
        before: world.fit,
      },
      allowed: themes.every(inModel),
      act: () => {
        world.fits[id] = made;
        world.fit = id;
        world.themes.push(worldTheme(candidate));
      },
    };
  },

  show: (world, { a }) => {
    const ids = Object.keys(world.fits).sort();
    const to = pick([...ids, null, 'gone'], a);
    return {
      edit: { kind: 'fitChosen', from: world.fit, to },
      allowed: to === null || to in world.fits,
      act: () => void (world.fit = to),
    };
  },
};

const gone: Decided = { at: 'nowhere', start: 0, end: 1, reader: 'ada', theme: 'x' };

function oneOf(all: Record<string, Decided>, number: number): [string, Decided] | undefined {
  const entries = Object.entries(all).sort(([a], [b]) => (a < b ? -1 : 1));
  return entries.length === 0 ? undefined : pick(entries, number);
}

/** Mostly a theme of the world, sometimes one that is not there. */
function themeOrNone(world: World, number: number): World['themes'][number] {
  return number % 11 === 10 || world.themes.length === 0
    ? worldTheme(theme('nowhere'))
    : pick(world.themes, number);
}

function worldTheme({ id, name, origin }: Theme): World['themes'][number] {
  return { id, name, origin, pinned: false, aside: false, into: null, seeds: [], shutOut: [] };
}

function moved(marks: ReturnType<typeof reworded>, { start, end }: Span): Span {
  const held = spanAmong(marks, { start, end });
  if (held !== null) return held;
  const astride = marks.some(({ from }) => from.start < start && start < from.end);
  const at = offsetAmong(marks, start, astride ? 'before' : 'after');
  return { start: at, end: at };
}
