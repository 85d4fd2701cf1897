import { randomInt } from 'node:crypto';
import { compareCodeUnits } from '../../engine/numbers/index.ts';
import { identifierKinds } from '../../engine/spans/index.ts';
import type { Identifier } from '../../engine/study/index.ts';
import { keyOf, nameKeyOf, shiftDate, type IdentifierGroup } from '../../engine/text/index.ts';
import type { Api, IdentifierPlace, IdentifierRow, IdentifiersView, Refused } from '../api.ts';
import { foundElsewhere } from '../identifying/elsewhere.ts';
import { openKey, sealKey } from '../identifying/key-file.ts';
import { rewordingDrafts } from '../identifying/revising.ts';
import { formsOf, settlingDrafts, type Settling } from '../identifying/settling.ts';
import { generalisations, isGeneralisedFirst, suggestStandIn } from '../identifying/stand-ins.ts';
import { isFullDate, movedDates, Standings, type PlaceOfGroup } from '../identifying/standing.ts';
import { passwordFault } from '../project/index.ts';
import { give, isRefused, refuse } from './answers.ts';
import { safeFileName } from './file-names.ts';
import type { OpenStudy } from './open-study.ts';
import type { Room } from './room.ts';
import type { Handlers } from './session-types.ts';

/** What could tell who somebody is: found, looked at, and replaced or left. */
export function identifierHandlers(
  room: Room,
): Pick<
  Handlers,
  | 'identifiers'
  | 'identifierPlaces'
  | 'identifiersIn'
  | 'settleIdentifiers'
  | 'reopenIdentifier'
  | 'moveDates'
  | 'identifierKey'
  | 'readIdentifierKey'
> {
  return {
    identifiers: room.look<null, IdentifiersView>(async (open) => give(await viewOf(open))),

    identifierPlaces: room.look(async (open, { key }: { key: string }) => {
      const group = (await open.names.groups()).find((each) => each.key === key);
      // Settled a moment ago, here or in another window: nothing of it is left to show.
      if (group === undefined) return give({ places: [], elsewhere: [] });
      return give({
        places: placesOf(open, [group]),
        elsewhere: foundElsewhere(open.study, formsOf(group.places)),
      });
    }),

    identifiersIn: room.look(async (open, { transcript }: { transcript: string }) => {
      const groups = await open.names.groups();
      const here = groups.map((group) => ({
        ...group,
        places: group.places.filter((place) => place.transcript === transcript),
      }));
      return give(placesOf(open, here).sort((a, b) => a.start - b.start));
    }),

    settleIdentifiers: room.decide(settle),

    reopenIdentifier: room.decide((open, { identifier: id }: { identifier: string }) => {
      const from = open.study.identifiers.get(id);
      if (from === undefined || from.replacement !== null) return refuse('identifier gone');
      return open.decide([{ kind: 'identifierSettled', identifier: id, from, to: null }]);
    }),

    moveDates: room.decide<null>(moveDates),

    identifierKey: room.look(async (open, { password }: { password: string }) => {
      const fault = passwordFault(password);
      if (fault !== null) return refuse('key password');
      const entries = [...open.study.identifiers.values()].filter(
        ({ forms, replacement }) => replacement !== null && forms.length > 0,
      );
      if (entries.length === 0) return refuse('no stand-ins');
      const bytes = await sealKey(
        entries.map(({ kind, forms, decision, replacement }) => ({
          kind,
          forms,
          decision,
          replacement,
        })),
        password,
      );
      return give({ fileName: `${safeFileName(open.study.name)} key.json`, bytes });
    }),

    readIdentifierKey: room.look(
      async (open, { name, bytes, password }: Api['readIdentifierKey']['takes']) => {
        const read = await openKey(bytes, password);
        if (!read.ok) return refuse(read.code, name);
        const edits = read.entries.flatMap((entry) => {
          const known = [...open.study.identifiers.values()].find(
            (other) => other.kind === entry.kind && other.replacement === entry.replacement,
          );
          const forms = [...new Set([...(known?.forms ?? []), ...entry.forms])].sort(
            compareCodeUnits,
          );
          if (known !== undefined && known.forms.length === forms.length) return [];
          const id = known?.id ?? open.desk.context.mintId('identifier');
          const to: Identifier = { id, putIn: [], places: null, ...known, ...entry, forms };
          return [{ kind: 'identifierSettled' as const, identifier: id, from: known ?? null, to }];
        });
        const refused = open.decide(edits);
        if (refused !== null) return refused;
        const after = await room.afterwards(open);
        return isRefused(after) ? after : give({ names: read.entries.length });
      },
    ),
  };
}

async function viewOf(open: OpenStudy): Promise<IdentifiersView> {
  const groups = await open.names.groups();
  const { study } = open;
  const standings = new Standings(study);
  const byTranscript: Record<string, number> = {};
  const rows: IdentifierRow[] = [];
  const spoken = spokenWords(open, groups);
  let movable = 0;
  for (const group of groups) {
    const standing = group.places.map((place) => standings.of(group, place));
    const places = group.places.filter((_, index) => standing[index] === 'open');
    const stays = standing.some((each) => each === 'left' || each === 'not identifying');
    if (places.length === 0) continue;
    for (const { transcript } of places) {
      byTranscript[transcript] = (byTranscript[transcript] ?? 0) + 1;
    }
    if (group.kind === 'date') movable += places.filter(({ form }) => isFullDate(form)).length;
    rows.push(rowOf(open, group, places, stays, spoken));
  }
  const kindOrder = new Map(identifierKinds.map((kind, index) => [kind, index]));
  rows.sort((a, b) => kindOrder.get(a.kind)! - kindOrder.get(b.kind)! || b.open - a.open);
  const identifiers = [...study.identifiers.values()];
  return {
    open: rows,
    settled: identifiers
      .filter(({ replacement }) => replacement !== movedDates)
      .map(({ id, kind, forms, decision, replacement, putIn, places }) => ({
        id,
        kind,
        forms,
        decision,
        replacement,
        transcripts:
          replacement !== null
            ? putIn.length
            : new Set((places ?? []).map(({ transcript }) => transcript)).size,
        canReopen: replacement === null,
      }))
      .sort(
        (a, b) =>
          kindOrder.get(a.kind)! - kindOrder.get(b.kind)! ||
          compareCodeUnits(a.replacement ?? a.forms[0] ?? '', b.replacement ?? b.forms[0] ?? ''),
      ),
    byTranscript,
    dates: {
      movable,
      moved: identifiers.some(({ replacement }) => replacement === movedDates),
    },
  };
}

function rowOf(
  { study }: OpenStudy,
  { key, kind, name }: IdentifierGroup,
  places: readonly PlaceOfGroup[],
  staysElsewhere: boolean,
  { taken, surnames, after }: ReturnType<typeof spokenWords>,
): IdentifierRow {
  const counts = new Map<string, number>();
  for (const { form } of places) counts.set(form, (counts.get(form) ?? 0) + 1);
  const keys = new Set(places.map(({ form }) => keyOf(kind, form)));
  const before = [...study.identifiers.values()].filter(
    (other) =>
      other.kind === kind &&
      other.replacement !== null &&
      other.forms.some((form) => keys.has(keyOf(kind, form))),
  );
  const same = [...study.identifiers.values()].some(
    (other) =>
      other.kind === kind &&
      other.decision === 'stand-in' &&
      other.replacement !== null &&
      nameKeyOf(other.replacement)
        .split(' ')
        .some((word) => nameKeyOf(name) === word),
  );
  const decided = before[0];
  const surname = surnames.has(nameKeyOf(name));
  const suggestion = suggestStandIn(kind, name, study.id, surname, (standIn) =>
    taken.has(nameKeyOf(standIn)),
  );
  taken.add(nameKeyOf(suggestion));
  const others = [...(after.get(nameKeyOf(name)) ?? [])];
  return {
    key,
    kind,
    name,
    forms: [...counts]
      .map(([form, occurrences]) => ({ form, occurrences }))
      .sort((a, b) => b.occurrences - a.occurrences || compareCodeUnits(a.form, b.form)),
    open: places.length,
    transcripts: new Set(places.map(({ transcript }) => transcript)).size,
    offered:
      decided !== undefined
        ? { decision: decided.decision, replacement: decided.replacement ?? '' }
        : isGeneralisedFirst(kind)
          ? { decision: 'generalised', replacement: generalisations[kind] }
          : { decision: 'stand-in', replacement: suggestion },
    before: before.flatMap(({ replacement }) => replacement ?? []),
    notes: [
      ...(before.length > 1
        ? [`Two stand-ins are in use for this name: look at each place before you choose.`]
        : []),
      ...(same ? ['Also a stand-in for somebody else: make sure who is meant.'] : []),
      ...(kind === 'person' && others.length > 1 && !surname
        ? [`Followed by ${listed(others)}: it may be more than one person.`]
        : []),
      ...(staysElsewhere ? ['In other places it was decided to stay.'] : []),
    ],
  };
}

/** Words that no stand-in may be, surnames, and what follows each given name. */
function spokenWords(open: OpenStudy, groups: readonly IdentifierGroup[]) {
  const taken = new Set<string>();
  const persons = new Map<string, { transcript: string; end: number; form: string }[]>();
  for (const { kind, forms, places } of groups) {
    for (const { form } of forms) for (const word of form.split(/\s+/u)) taken.add(nameKeyOf(word));
    if (kind !== 'person') continue;
    for (const place of places) {
      const own = persons.get(place.transcript) ?? [];
      persons.set(place.transcript, own);
      own.push(place);
    }
  }
  for (const { replacement } of open.study.identifiers.values()) {
    for (const word of (replacement ?? '').split(/\s+/u)) taken.add(nameKeyOf(word));
  }
  const after = new Map<string, Set<string>>();
  const surnames = new Set<string>();
  for (const places of persons.values()) {
    const sorted = [...places].sort((a, b) => a.end - b.end);
    for (const [index, { end, form }] of sorted.entries()) {
      const next = sorted[index + 1];
      if (next === undefined || next.end - next.form.length !== end + 1) continue;
      const key = nameKeyOf(form);
      after.set(key, (after.get(key) ?? new Set()).add(next.form));
      surnames.add(nameKeyOf(next.form));
    }
  }
  return { taken, surnames, after };
}

function listed(words: readonly string[]): string {
  const shown = words.slice(0, 4);
  return `${shown.slice(0, -1).join(', ')} and ${shown.at(-1)}`;
}

const contextUnits = 60;

function placesOf(open: OpenStudy, groups: readonly IdentifierGroup[]): IdentifierPlace[] {
  const { study, desk } = open;
  const standings = new Standings(study);
  return groups.flatMap((group) =>
    group.places.flatMap((place) => {
      const transcript = study.transcripts.get(place.transcript);
      if (transcript === undefined) return [];
      const text = desk.text(transcript.id);
      const turn = transcript.turns.find(
        ({ start, end }) => start <= place.start && place.end <= end,
      );
      return [
        {
          key: group.key,
          kind: group.kind,
          transcript: place.transcript,
          start: place.start,
          end: place.end,
          standing: standings.of(group, place),
          transcriptName: transcript.name,
          speaker: turn?.speaker ?? null,
          before: text.slice(Math.max(0, place.start - contextUnits), place.start),
          match: place.form,
          after: text.slice(place.end, place.end + contextUnits),
        },
      ];
    }),
  );
}

async function settle(
  open: OpenStudy,
  { settle: asked, elsewhere }: Api['settleIdentifiers']['takes'],
): Promise<Refused | null> {
  const groups = new Map((await open.names.groups()).map((group) => [group.key, group]));
  const standings = new Standings(open.study);
  const settlings: Settling[] = [];
  for (const { key, decision, replacement, places } of asked) {
    const group = groups.get(key);
    if (group === undefined) return refuse('identifier gone');
    const free = group.places.filter((place) => standings.of(group, place) === 'open');
    const chosen =
      places === null
        ? free
        : free.filter((one) =>
            places.some(
              ({ transcript, start, end }) =>
                transcript === one.transcript && start === one.start && end === one.end,
            ),
          );
    if (chosen.length === 0) return refuse('identifier gone');
    const replaces = decision === 'stand-in' || decision === 'generalised';
    if (replaces && (replacement ?? '').trim() === '') return refuse('no replacement', group.name);
    settlings.push({
      kind: group.kind,
      decision,
      replacement: replaces ? (replacement ?? '').trim() : null,
      places: chosen,
      everywhere: chosen.length === free.length,
    });
  }
  const { study, desk } = open;
  return open.decide(
    settlingDrafts(
      study,
      settlings,
      elsewhere,
      (transcript) => desk.text(transcript),
      () => desk.context.mintId('identifier'),
    ),
  );
}

/** One to twelve months, there or back: chosen once, kept where the names are. */
async function moveDates(open: OpenStudy): Promise<Refused | null> {
  const { study, desk } = open;
  const standings = new Standings(study);
  const known = [...study.identifiers.values()].find(
    ({ replacement }) => replacement === movedDates,
  );
  const days =
    known?.forms[0] === undefined
      ? randomInt(28, 365) * (randomInt(2) === 0 ? -1 : 1)
      : Number(known.forms[0]);
  const byTranscript = new Map<string, { start: number; end: number; words: string }[]>();
  for (const group of await open.names.groups()) {
    if (group.kind !== 'date') continue;
    for (const place of group.places) {
      const words = shiftDate(place.form, days);
      if (words === null || standings.of(group, place) !== 'open') continue;
      const own = byTranscript.get(place.transcript) ?? [];
      byTranscript.set(place.transcript, own);
      own.push({ start: place.start, end: place.end, words });
    }
  }
  if (byTranscript.size === 0) return refuse('no dates to move');
  const id = known?.id ?? desk.context.mintId('identifier');
  const to: Identifier = {
    id,
    kind: 'date',
    forms: [String(days)],
    decision: 'stand-in',
    replacement: movedDates,
    putIn: [...new Set([...(known?.putIn ?? []), ...byTranscript.keys()])].sort(compareCodeUnits),
    places: null,
  };
  return open.decide([
    { edit: { kind: 'identifierSettled', identifier: id, from: known ?? null, to } },
    ...[...byTranscript].flatMap(([transcript, rewordings]) =>
      rewordingDrafts(
        study,
        study.transcripts.get(transcript)!,
        desk.text(transcript),
        rewordings.sort((a, b) => a.start - b.start),
      ),
    ),
  ]);
}
