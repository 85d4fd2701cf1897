import * as v from 'valibot';
import type { Api, Method } from '../api.ts';
import { limits } from './limits.ts';

const name = v.pipe(v.string(), v.maxLength(limits.name));
const path = v.pipe(v.string(), v.minLength(1), v.maxLength(limits.path));
const password = v.pipe(v.string(), v.maxLength(limits.password));
const text = v.pipe(v.string(), v.maxLength(limits.text));
const id = v.pipe(v.string(), v.minLength(1), v.maxLength(limits.name));
const offset = v.pipe(v.number(), v.safeInteger(), v.minValue(0));
const count = v.pipe(v.number(), v.safeInteger(), v.minValue(1), v.maxValue(1_000_000));
const themeCount = v.pipe(v.number(), v.safeInteger(), v.minValue(2), v.maxValue(200));
const nothing = v.null();

function listOf<Item extends v.GenericSchema>(item: Item) {
  return v.pipe(v.array(item), v.maxLength(limits.list), v.readonly());
}

const ids = listOf(id);
const words = listOf(name);
const bytes = v.pipe(
  v.instance(Uint8Array),
  v.check((array) => array.byteLength <= limits.fileBytes, 'a file must not be larger'),
);
const file = v.strictObject({ name, bytes });

const span = { start: offset, end: offset };
const place = v.pipe(
  v.strictObject({ transcript: id, ...span }),
  v.check(({ start, end }) => start <= end, 'a span must not end before its start'),
);

const underView = { drawnBy: name, seenSuggestion: v.boolean() };
const code = v.strictObject({ place, theme: id, memo: text, ...underView });

function entries<Value extends v.GenericSchema>(value: Value) {
  return v.pipe(
    v.record(name, value),
    v.check((record) => Object.keys(record).length <= limits.list, 'too many entries'),
  );
}

const reportRequest = {
  standings: v.pipe(
    v.array(v.picklist(['confirmed', 'by hand', 'suggested', 'rejected'])),
    v.maxLength(4),
  ),
  themes: v.nullable(ids),
  guard: v.boolean(),
};

const trailRequest = {
  by: v.nullable(name),
  kind: v.nullable(name),
  since: v.nullable(name),
  theme: v.nullable(id),
};
const listKind = v.picklist([
  'in order',
  'strongest first',
  'nearest the edge',
  'unexplained',
  'random draw',
  'cold sample',
  'one theme',
  'earlier wording',
  'keyword in context',
]);
const searched = {
  text: name,
  mode: v.picklist(['words', 'stems', 'phrase', 'near']),
  within: v.pipe(v.number(), v.safeInteger(), v.minValue(1), v.maxValue(100)),
  order: v.picklist(['place', 'left', 'right']),
};
const drawn = v.pipe(v.number(), v.safeInteger(), v.minValue(0), v.maxValue(1_000_000));
const seed = v.pipe(v.number(), v.safeInteger());
const rank = v.pipe(v.number(), v.safeInteger(), v.minValue(-1));

const preferences = v.strictObject({
  suggestions: v.boolean(),
  goOn: v.boolean(),
  singleKeys: v.boolean(),
  keys: entries(v.pipe(v.string(), v.maxLength(20))),
});
const stoppedAt = v.strictObject({
  kind: listKind,
  unreadOnly: v.boolean(),
  count: drawn,
  seed,
  theme: rank,
  only: rank,
  transcript: rank,
  start: offset,
});

/** How the payload of each method is read from an unknown value. */
export const payloads = {
  about: nothing,
  recentStudies: nothing,
  overview: nothing,

  openDemo: nothing,
  startStudy: v.strictObject({ name, path: v.nullable(path), password: v.optional(password) }),
  openStudy: v.strictObject({
    path: v.nullable(path),
    readOnly: v.boolean(),
    despiteNote: v.optional(v.boolean()),
  }),
  lockedStudy: nothing,
  unlockStudy: v.strictObject({ password }),
  leaveLocked: nothing,
  lockStudy: nothing,
  stillHere: nothing,
  passwordView: nothing,
  setPassword: v.strictObject({ current: v.nullable(password), next: v.nullable(password) }),
  setIdleMinutes: v.strictObject({
    minutes: v.pipe(v.number(), v.safeInteger(), v.minValue(0), v.maxValue(60)),
  }),
  closeStudy: nothing,
  copyStudy: v.strictObject({ path: v.nullable(path), goOn: v.boolean() }),
  backupsView: nothing,
  keepBackups: v.strictObject({
    keep: v.pipe(v.number(), v.safeInteger(), v.minValue(0), v.maxValue(100)),
    folder: v.nullable(path),
  }),
  chooseBackupFolder: nothing,
  makeBackup: nothing,
  removeBackup: v.strictObject({ path }),
  openBackup: v.strictObject({ backup: path, path: v.nullable(path) }),
  compactView: nothing,
  compactStudy: nothing,
  recoverStudy: v.strictObject({ path, to: v.nullable(path), password: v.optional(text) }),
  renameStudy: v.strictObject({ name }),
  nameReader: v.strictObject({ name }),
  undo: nothing,
  redo: nothing,

  chooseTranscripts: nothing,
  addTranscripts: v.strictObject({ files: v.pipe(v.array(file), v.maxLength(limits.files)) }),
  addTable: v.strictObject({
    table: id,
    sheet: name,
    text: words,
    participant: v.nullable(name),
    attributes: words,
  }),
  leaveTable: v.strictObject({ table: id }),
  settleDoubles: v.strictObject({
    choices: listOf(
      v.strictObject({ double: id, choice: v.picklist(['skip', 'replace', 'keep both']) }),
    ),
  }),
  addFieldNotes: v.strictObject({
    files: v.pipe(v.array(file), v.maxLength(limits.files)),
    transcript: v.nullable(id),
  }),
  fieldNoteView: v.strictObject({ note: id }),
  describeFieldNote: v.strictObject({ note: id, name, transcript: v.nullable(id) }),
  removeFieldNote: v.strictObject({ note: id }),
  readCodebook: v.strictObject({ name, bytes }),
  addCodebook: v.strictObject({ name, bytes, names: words, byHand: v.boolean() }),
  addAttributes: v.strictObject({ name, bytes }),
  gatherView: nothing,
  counted: nothing,
  transcriptView: v.strictObject({ transcript: id }),
  identifiers: nothing,
  identifierPlaces: v.strictObject({ key: name }),
  identifiersIn: v.strictObject({ transcript: id }),
  settleIdentifiers: v.strictObject({
    settle: listOf(
      v.strictObject({
        key: name,
        decision: v.picklist(['stand-in', 'generalised', 'left', 'not identifying']),
        replacement: v.nullable(name),
        places: v.nullable(listOf(place)),
      }),
    ),
    elsewhere: v.boolean(),
  }),
  reopenIdentifier: v.strictObject({ identifier: id }),
  moveDates: nothing,
  identifierKey: v.strictObject({ password: name }),
  readIdentifierKey: v.strictObject({ name, bytes, password: name }),
  renameTranscript: v.strictObject({ transcript: id, name }),
  removeTranscript: v.strictObject({ transcript: id }),
  assignSpeaker: v.strictObject({
    transcript: id,
    label: v.nullable(name),
    role: v.picklist(['interviewer', 'participant', 'other']),
    participant: v.nullable(name),
    everywhere: v.boolean(),
  }),
  describeParticipant: v.strictObject({ participant: id, name, attributes: entries(text) }),
  changeSettings: v.strictObject({
    settings: entries(v.union([text, v.pipe(v.number(), v.finite()), v.boolean(), words])),
  }),

  fit: v.strictObject({
    kind: v.picklist(['from scratch', 're-fit']),
    themes: v.nullable(count),
  }),
  moved: nothing,
  movedFloor: nothing,
  chooseFit: v.strictObject({ fit: id }),
  nameFit: v.strictObject({ fit: id, name }),
  compareFits: v.strictObject({ first: id, second: id }),
  stopRefining: nothing,
  gatherEvidence: v.variant('what', [
    v.strictObject({
      what: v.literal('steadiness'),
      resamples: v.pipe(v.number(), v.safeInteger(), v.minValue(2), v.maxValue(1000)),
    }),
    v.pipe(
      v.strictObject({ what: v.literal('how many'), from: themeCount, to: themeCount }),
      v.check(({ from, to }) => from <= to, 'from must not be above to'),
    ),
  ]),
  evidenceView: nothing,

  shapeView: nothing,
  strata: nothing,
  strataFigure: v.strictObject({ theme: v.nullable(id), transcripts: ids }),
  themeView: v.strictObject({ theme: id }),
  themePassages: v.strictObject({
    theme: id,
    list: v.picklist(['strongest', 'nearest the edge', 'rejected', 'earlier wording']),
  }),
  themeSpread: v.strictObject({ theme: id }),
  seedCheck: v.strictObject({ theme: v.nullable(id), words }),
  wordView: v.strictObject({ form: name }),
  nameTheme: v.strictObject({ theme: id, name }),
  defineTheme: v.strictObject({
    theme: id,
    code: name,
    brief: text,
    full: text,
    whenToUse: text,
    whenNotToUse: text,
    examples: text,
  }),
  addTheme: v.strictObject({ name, byHand: v.boolean(), seeds: words }),
  addThemeFromPassages: v.strictObject({ name, passages: listOf(place) }),
  splitPreview: v.strictObject({ theme: id }),
  splitTheme: v.strictObject({ theme: id }),
  pinTheme: v.strictObject({ theme: id, pinned: v.boolean() }),
  setThemeAside: v.strictObject({ theme: id, aside: v.boolean() }),
  mergePreview: v.strictObject({ into: id, from: ids }),
  mergeThemes: v.strictObject({ into: id, from: ids }),
  orderThemes: v.strictObject({ themes: ids }),
  addHeading: v.strictObject({ name, themes: ids }),
  changeHeading: v.strictObject({ heading: id, name, themes: ids }),
  removeHeading: v.strictObject({ heading: id }),
  putUnder: v.strictObject({ theme: id, heading: v.nullable(id) }),
  seedWord: v.strictObject({ theme: id, word: name, seeded: v.boolean() }),
  shutOutWord: v.strictObject({ theme: id, word: name, shutOut: v.boolean() }),

  readingList: v.strictObject({
    kind: listKind,
    theme: v.nullable(id),
    transcript: v.nullable(id),
    unreadOnly: v.boolean(),
    count: drawn,
    seed,
    search: v.exactOptional(v.strictObject(searched)),
  }),
  passageView: v.strictObject({ place }),
  confirm: code,
  reject: code,
  codeByHand: code,
  keepCoding: v.strictObject({ transcript: id, coding: id }),
  removeCoding: v.strictObject({ transcript: id, coding: id }),
  markNone: v.strictObject({ place, ...underView }),
  clearNone: v.strictObject({ transcript: id, none: id }),
  moveCoding: v.strictObject({ transcript: id, coding: id, theme: id, ...underView }),
  codeTogether: v.strictObject({ places: listOf(place), theme: id, ...underView }),
  drawSample: v.strictObject({
    kind: v.picklist(['random draw', 'cold sample']),
    count,
    seed: v.pipe(seed, v.minValue(0), v.maxValue(4_294_967_295)),
    unreadOnly: v.boolean(),
  }),
  scoreColdSample: nothing,
  readingEvidence: nothing,
  search: v.strictObject({
    ...searched,
    from: drawn,
    count: v.pipe(count, v.maxValue(limits.list)),
  }),
  readingKept: nothing,
  keepReading: v.strictObject({
    preferences: v.nullable(preferences),
    stopped: v.nullable(stoppedAt),
  }),
  writeMemo: v.strictObject({
    on: v.variant('kind', [
      v.strictObject({ kind: v.literal('study') }),
      v.strictObject({ kind: v.literal('transcript'), transcript: id }),
      v.strictObject({ kind: v.literal('passage'), place }),
      v.strictObject({ kind: v.literal('theme'), theme: id }),
      v.strictObject({ kind: v.literal('coding'), transcript: id, coding: id }),
    ]),
    text,
  }),
  reviseMemo: v.strictObject({ memo: id, text }),

  find: v.strictObject({ text: name }),
  reportPreview: v.strictObject(reportRequest),
  report: v.strictObject({
    ...reportRequest,
    format: v.picklist(['csv', 'json', 'html', 'docx', 'themes csv', 'methods']),
  }),
  verifyStudy: v.strictObject({ head: v.nullable(name) }),
  trailView: v.strictObject(trailRequest),
  trailFile: v.strictObject({ ...trailRequest, format: v.picklist(['csv', 'markdown']) }),
  withdrawalView: v.strictObject({ participant: id, names: words }),
  withdrawParticipant: v.strictObject({ participant: id, names: words, refit: v.boolean() }),
  sealView: nothing,
  sealOriginals: v.strictObject({ names: words, refit: v.boolean() }),
  takeInView: v.strictObject({ path: v.nullable(path), password: v.nullable(name) }),
  takeIn: v.strictObject({
    path,
    password: v.nullable(name),
    head: name,
    choices: entries(v.picklist(['mine', 'theirs', 'both'])),
  }),
  saveFile: v.strictObject({ fileName: id, bytes }),
} as const satisfies {
  readonly [Name in Method]: v.GenericSchema<unknown, Api[Name]['takes']>;
};

type Comparable<Value> = Value extends Uint8Array
  ? 'bytes'
  : Value extends string | number | boolean | null
    ? Value
    : { readonly [Key in keyof Value]: Comparable<Value[Key]> };

/** Methods whose schema would refuse something that the api takes. */
type TooNarrow = {
  [Name in Method]: Comparable<Api[Name]['takes']> extends Comparable<
    v.InferOutput<(typeof payloads)[Name]>
  >
    ? never
    : Name;
}[Method];

/** Fails to compile where a schema is narrower than the api. */
export const noPayloadIsTooNarrow: [TooNarrow] extends [never] ? true : TooNarrow = true;
