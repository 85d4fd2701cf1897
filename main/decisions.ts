import {
  emptyDefinition,
  nameKey,
  visibleThemes,
  type Coding,
  type Definition,
  type Edit,
  type SettingValue,
  type Study,
  type Theme,
} from '../engine/study/index.ts';
import { formOf, type Language } from '../engine/text/index.ts';
import { settingsFault, settingsOf } from '../engine/themes/index.ts';
import type { Desk, DeskResult } from './desk.ts';
import { interviewersAmong } from './gather/gather.ts';
import { participantName } from './gather/participants.ts';
import type { Plan, PlannedCoding, PlannedTheme } from './plan.ts';

export type PlanRefusal =
  | { readonly ok: false; readonly code: 'plan names no theme'; readonly subject: string }
  | { readonly ok: false; readonly code: 'plan names no transcript'; readonly subject: string }
  | { readonly ok: false; readonly code: 'plan names no speaker'; readonly subject: string }
  | {
      readonly ok: false;
      readonly code: 'setting';
      readonly subject: string;
      readonly must: string;
    };

type Applied = DeskResult<unknown> | PlanRefusal;

/** Makes every decision of a plan, in its order; stops at the first that cannot be made. */
export function applyPlan(desk: Desk, plan: Plan): Applied {
  const steps: ((desk: Desk) => Applied)[] = [
    (d) => applySettings(d, plan.settings),
    (d) => applyInterviewers(d, plan.interviewers),
    ...plan.themes.map((planned) => (d: Desk) => applyTheme(d, planned)),
    ...plan.codings.map((planned) => (d: Desk) => applyCoding(d, planned)),
  ];
  for (const step of steps) {
    const result = step(desk);
    if (!result.ok) return result;
  }
  return { ok: true, value: null };
}

/** Changes settings to the given values; refuses unknown ones and values out of range. */
export function applySettings(desk: Desk, settings: Record<string, SettingValue>): Applied {
  const before = desk.study.settings;
  const fault = settingsFault({ ...before, ...settings });
  if (fault !== null) return { ok: false, code: 'setting', subject: fault.key, must: fault.must };
  const changes = Object.entries(settings)
    .filter(([key, to]) => JSON.stringify(before[key]) !== JSON.stringify(to))
    .map(([key, to]) => ({ key, from: before[key] ?? null, to }));
  return changes.length === 0
    ? { ok: true, value: null }
    : desk.make([{ edit: { kind: 'settingsChanged', changes } }]);
}

/** Gives the interviewer's role to labels, in every transcript where they occur. */
export function applyInterviewers(desk: Desk, interviewers: readonly string[]): Applied {
  const group = desk.context.mintId('group');
  let met = interviewers.length === 0;
  for (const transcript of desk.study.transcripts.values()) {
    const labels = transcript.speakers.map(({ label }) => label);
    const asking = interviewersAmong(labels, interviewers);
    if (asking === null) continue;
    met = true;
    const drafts: Edit[] = [];
    const others = labels.filter((label) => label === null || !asking.has(label)).length;
    const byName = new Map([...desk.study.participants.values()].map((one) => [one.name, one.id]));
    const speakers = transcript.speakers.map((speaker) => {
      if (speaker.label !== null && asking.has(speaker.label)) {
        return { label: speaker.label, role: 'interviewer' as const, participant: null };
      }
      if (speaker.role !== 'interviewer') return speaker;
      const name = participantName(speaker.label, transcript.name, others);
      let participant = byName.get(name);
      if (participant === undefined) {
        participant = desk.context.mintId('participant');
        drafts.push({
          kind: 'participantAdded',
          participant: { id: participant, name, attributes: {} },
        });
      }
      return { label: speaker.label, role: 'participant' as const, participant };
    });
    if (JSON.stringify(speakers) === JSON.stringify(transcript.speakers)) continue;
    drafts.push({
      kind: 'speakersAssigned',
      transcript: transcript.id,
      from: transcript.speakers,
      to: speakers,
    });
    const made = desk.make(
      drafts.map((edit) => ({ edit })),
      { group },
    );
    if (!made.ok) return made;
  }
  return met
    ? { ok: true, value: null }
    : { ok: false, code: 'plan names no speaker', subject: interviewers[0] };
}

function applyTheme(desk: Desk, planned: PlannedTheme): Applied {
  const known = findPlanned(desk.study, planned);
  if (known === undefined && planned.id !== undefined) {
    return { ok: false, code: 'plan names no theme', subject: planned.id };
  }
  const edits: Edit[] = [];
  const theme = known ?? newTheme(desk.context.mintId('theme'), planned);
  if (known === undefined) edits.push({ kind: 'themeAdded', theme });
  if (planned.name !== undefined && planned.name !== theme.name) {
    edits.push({ kind: 'themeRenamed', theme: theme.id, from: theme.name, to: planned.name });
  }
  if (planned.brief !== undefined && planned.brief !== theme.definition.brief) {
    const definition: Definition = { ...theme.definition, brief: planned.brief };
    const { version } = theme;
    edits.push({
      kind: 'themeDefined',
      theme: theme.id,
      from: { version, definition: theme.definition },
      to: { version: version + 1, definition },
    });
  }
  for (const name of planned.merge) {
    const other = findTheme(desk.study, name);
    if (other === undefined) return { ok: false, code: 'plan names no theme', subject: name };
    edits.push({ kind: 'themesMerged', into: theme.id, from: [other.id] });
  }
  const { language } = settingsOf(desk.study.settings).text;
  for (const word of wordsAsCounted(planned.seed, language)) {
    if (!theme.seeds.includes(word)) edits.push({ kind: 'wordSeeded', theme: theme.id, word });
  }
  for (const word of wordsAsCounted(planned.shutOut, language)) {
    if (!theme.shutOut.includes(word)) edits.push({ kind: 'wordShutOut', theme: theme.id, word });
  }
  if (planned.pin !== undefined && planned.pin !== theme.pinned) {
    edits.push({ kind: planned.pin ? 'themePinned' : 'themeUnpinned', theme: theme.id });
  }
  if (planned.setAside !== undefined && planned.setAside !== theme.setAside) {
    edits.push({
      kind: planned.setAside ? 'themeSetAside' : 'themeBroughtBack',
      theme: theme.id,
    });
  }
  return desk.make(
    edits.map((edit) => ({ edit })),
    { group: desk.context.mintId('group') },
  );
}

/** Typed words in the form that they are counted under, so that “Soil” and “soil” are one. */
function wordsAsCounted(typed: readonly string[], language: Language): Set<string> {
  return new Set(typed.map((word) => formOf(word, language) ?? word.normalize('NFC')));
}

function applyCoding(desk: Desk, planned: PlannedCoding): Applied {
  const { study, context } = desk;
  const transcript = [...study.transcripts.values()].find(
    ({ name }) => name === planned.transcript,
  );
  if (transcript === undefined) {
    return { ok: false, code: 'plan names no transcript', subject: planned.transcript };
  }
  // On the command line nobody is signed in: the program codes under its own name.
  if (!study.readers.has(context.by)) {
    const reader = { id: context.by, name: context.by };
    const added = desk.make([{ edit: { kind: 'readerAdded', reader } }]);
    if (!added.ok) return added;
  }
  const under = {
    reader: context.by,
    at: context.now(),
    drawnBy: 'plan',
    seenSuggestion: false,
    fit: study.fit,
  };
  const span = { start: planned.start, end: planned.end };
  const id = context.mintId('coding');
  if (planned.standing === 'none') {
    return desk.make([
      { edit: { kind: 'noneMarked', none: { id, transcript: transcript.id, span, under } } },
    ]);
  }
  const theme = planned.theme === undefined ? undefined : findTheme(study, planned.theme);
  if (theme === undefined) {
    return { ok: false, code: 'plan names no theme', subject: planned.theme ?? '' };
  }
  const coding: Coding = {
    id,
    transcript: transcript.id,
    span,
    theme: theme.id,
    standing: planned.standing,
    under,
    strength: null,
    codebookVersion: theme.version,
    memo: planned.memo,
  };
  return desk.make([{ edit: { kind: 'codingMade', coding } }]);
}

function findPlanned(study: Study, { id, name }: PlannedTheme): Theme | undefined {
  return id !== undefined ? study.themes.get(id) : findTheme(study, name ?? '');
}

/** A theme by its name, else by its id. */
function findTheme(study: Study, name: string): Theme | undefined {
  const key = nameKey(name);
  return (
    visibleThemes(study).find((theme) => theme.name !== null && nameKey(theme.name) === key) ??
    study.themes.get(name)
  );
}

function newTheme(id: string, { name, byHand }: PlannedTheme): Theme {
  return {
    id,
    name: name ?? null,
    origin: byHand ? 'by hand' : 'asked for',
    definition: emptyDefinition,
    version: 1,
    pinned: false,
    setAside: false,
    mergedInto: null,
    seeds: [],
    shutOut: [],
  };
}
