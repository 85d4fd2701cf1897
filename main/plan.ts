import * as v from 'valibot';

const name = v.pipe(v.string(), v.trim(), v.nonEmpty('a name may not be empty'));
const words = v.optional(v.array(name), []);

const plannedTheme = v.pipe(
  v.strictObject({
    /** The theme's id, where it has no name yet or shall get a new one. */
    id: v.optional(name),
    name: v.optional(name),
    brief: v.optional(v.string()),
    byHand: v.optional(v.boolean(), false),
    seed: words,
    shutOut: words,
    pin: v.optional(v.boolean()),
    setAside: v.optional(v.boolean()),
    merge: words,
  }),
  v.check((theme) => theme.id !== undefined || theme.name !== undefined, 'needs a name or an id'),
);

const plannedCoding = v.strictObject({
  transcript: name,
  start: v.pipe(v.number(), v.integer(), v.minValue(0)),
  end: v.pipe(v.number(), v.integer(), v.minValue(1)),
  theme: v.optional(name),
  standing: v.picklist(['confirmed', 'rejected', 'by hand', 'none']),
  memo: v.optional(v.string(), ''),
});

const plan = v.strictObject({
  themes: v.optional(v.array(plannedTheme), []),
  interviewers: v.optional(v.array(name), []),
  codings: v.optional(v.array(plannedCoding), []),
  settings: v.optional(
    v.record(v.string(), v.union([v.string(), v.number(), v.boolean(), v.array(v.string())])),
    {},
  ),
});

/** Decisions in a file, for the command line. */
export type Plan = v.InferOutput<typeof plan>;
export type PlannedTheme = Plan['themes'][number];
export type PlannedCoding = Plan['codings'][number];

export const emptyPlan: Plan = v.parse(plan, {});

export type ParsedPlan =
  | { readonly ok: true; readonly value: Plan }
  | {
      readonly ok: false;
      readonly code: 'plan is not JSON' | 'unknown plan key' | 'plan value';
      /** Where in the plan ("themes[2].seed"), empty for the whole. */
      readonly place: string;
      readonly problem: string;
    };

/** Reads a plan; refuses unknown keys and wrong values, naming the first place. */
export function parsePlan(text: string): ParsedPlan {
  let json: unknown;
  try {
    json = JSON.parse(text);
  } catch {
    return { ok: false, code: 'plan is not JSON', place: '', problem: '' };
  }
  if (Array.isArray(json)) {
    return { ok: false, code: 'plan value', place: '', problem: 'an object in braces is needed' };
  }
  const parsed = v.safeParse(plan, json, { abortEarly: true });
  if (parsed.success) return { ok: true, value: parsed.output };
  const [issue] = parsed.issues;
  const place = placeOf(issue.path ?? []);
  return issue.type === 'strict_object' && issue.expected === 'never'
    ? { ok: false, code: 'unknown plan key', place, problem: '' }
    : { ok: false, code: 'plan value', place, problem: problemOf(issue) };
}

/** What is needed, in a person's words; checks of our own bring theirs along. */
function problemOf({ type, message, expected }: v.BaseIssue<unknown>): string {
  if (type === 'picklist') return `one of ${expected?.replace(/[()]/gu, '')} is needed`;
  return needed[type] ?? message;
}

const needed: Readonly<Record<string, string>> = {
  string: 'a text in quotes is needed',
  number: 'a number is needed',
  integer: 'a whole number is needed',
  min_value: 'a larger number is needed',
  boolean: 'true or false is needed',
  array: 'a list in square brackets is needed',
  strict_object: 'an object in braces is needed',
  record: 'an object in braces is needed',
  union: 'a number, a text, true, false or a list of texts is needed',
};

function placeOf(path: readonly { readonly key?: unknown }[]): string {
  return path.reduce(
    (place, { key }) =>
      typeof key === 'number' ? `${place}[${key}]` : place === '' ? `${key}` : `${place}.${key}`,
    '',
  );
}
