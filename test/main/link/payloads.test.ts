import * as v from 'valibot';
import { describe, expect, it } from 'vitest';
import { methods, type Api, type Method } from '../../../main/api.ts';
import { limits, payloads } from '../../../main/link/index.ts';

const place = { transcript: 't1', start: 3, end: 9 };
const code = { place, theme: 'a', memo: '', drawnBy: 'in order', seenSuggestion: true };
const bytes = Uint8Array.of(1, 2, 3);

const samples: { readonly [Name in Method]: Api[Name]['takes'] } = {
  about: null,
  recentStudies: null,
  overview: null,
  openDemo: null,
  startStudy: { name: 'Ferry', path: null },
  openStudy: { path: '/a/b.understory', readOnly: false },
  lockedStudy: null,
  unlockStudy: { password: 'moss after rain' },
  leaveLocked: null,
  lockStudy: null,
  stillHere: null,
  passwordView: null,
  setPassword: { current: null, next: 'moss after rain' },
  setIdleMinutes: { minutes: 5 },
  closeStudy: null,
  copyStudy: { path: null, goOn: true },
  backupsView: null,
  keepBackups: { keep: 5, folder: '/safe' },
  chooseBackupFolder: null,
  makeBackup: null,
  removeBackup: { path: '/a backup 1.understory' },
  openBackup: { backup: '/a backup 1.understory', path: null },
  compactView: null,
  compactStudy: null,
  recoverStudy: { path: '/a.understory', to: null },
  renameStudy: { name: 'Ferry' },
  nameReader: { name: 'Ada' },
  undo: null,
  redo: null,
  chooseTranscripts: null,
  addTranscripts: { files: [{ name: 'a.txt', bytes }] },
  addTable: { table: '1', sheet: '', text: ['Why?'], participant: null, attributes: ['age'] },
  leaveTable: { table: '1' },
  settleDoubles: { choices: [{ double: '1', choice: 'replace' }] },
  addFieldNotes: { files: [{ name: 'a.txt', bytes }], transcript: null },
  fieldNoteView: { note: 'n1' },
  describeFieldNote: { note: 'n1', name: 'Walk', transcript: 't1' },
  removeFieldNote: { note: 'n1' },
  readCodebook: { name: 'a.qdc', bytes },
  addCodebook: { name: 'a.qdc', bytes, names: ['Sea'], byHand: true },
  addAttributes: { name: 'a.csv', bytes },
  gatherView: null,
  counted: null,
  transcriptView: { transcript: 't1' },
  identifiers: null,
  identifierPlaces: { key: 'person ruth' },
  identifiersIn: { transcript: 't1' },
  settleIdentifiers: {
    settle: [
      {
        key: 'person ruth',
        decision: 'stand-in',
        replacement: 'Anna',
        places: [{ transcript: 't1', start: 3, end: 7 }],
      },
      { key: 'place nes', decision: 'left', replacement: null, places: null },
    ],
    elsewhere: true,
  },
  reopenIdentifier: { identifier: 'i1' },
  moveDates: null,
  identifierKey: { password: 'long enough' },
  readIdentifierKey: { name: 'key.json', bytes: new Uint8Array([1]), password: 'long enough' },
  renameTranscript: { transcript: 't1', name: 'One' },
  removeTranscript: { transcript: 't1' },
  assignSpeaker: {
    transcript: 't1',
    label: null,
    role: 'participant',
    participant: 'P1',
    everywhere: true,
  },
  describeParticipant: { participant: 'p1', name: 'P1', attributes: { island: 'Hoy' } },
  changeSettings: { settings: { themes: 12, stemming: true, language: 'eng', extra: ['uh'] } },
  fit: { kind: 'from scratch', themes: 12 },
  moved: null,
  movedFloor: null,
  chooseFit: { fit: 'f1' },
  nameFit: { fit: 'f1', name: 'First look' },
  compareFits: { first: 'f1', second: 'f2' },
  stopRefining: null,
  gatherEvidence: { what: 'how many', from: 4, to: 12 },
  evidenceView: null,
  shapeView: null,
  strata: null,
  strataFigure: { theme: null, transcripts: ['t2', 't1'] },
  themeView: { theme: 'a' },
  themePassages: { theme: 'a', list: 'nearest the edge' },
  themeSpread: { theme: 'a' },
  seedCheck: { theme: null, words: ['boat'] },
  wordView: { form: 'ferri' },
  nameTheme: { theme: 'a', name: 'Crossing' },
  defineTheme: {
    theme: 'a',
    code: 'CROSS',
    brief: '',
    full: '',
    whenToUse: '',
    whenNotToUse: '',
    examples: '',
  },
  addTheme: { name: 'Asking favours', byHand: true, seeds: [] },
  addThemeFromPassages: { name: 'Waiting', passages: [place] },
  splitPreview: { theme: 'a' },
  splitTheme: { theme: 'a' },
  pinTheme: { theme: 'a', pinned: true },
  setThemeAside: { theme: 'a', aside: true },
  mergePreview: { into: 'a', from: ['b'] },
  mergeThemes: { into: 'a', from: ['b'] },
  orderThemes: { themes: ['b', 'a'] },
  addHeading: { name: 'Getting about', themes: ['a'] },
  changeHeading: { heading: 'h1', name: 'Travel', themes: ['b'] },
  removeHeading: { heading: 'h1' },
  putUnder: { theme: 'a', heading: null },
  seedWord: { theme: 'a', word: 'boat', seeded: true },
  shutOutWord: { theme: 'a', word: 'boat', shutOut: true },
  readingList: {
    kind: 'random draw',
    theme: null,
    transcript: null,
    unreadOnly: true,
    count: 60,
    seed: 7,
  },
  passageView: { place },
  confirm: code,
  reject: code,
  codeByHand: code,
  keepCoding: { transcript: 't1', coding: 'c1' },
  removeCoding: { transcript: 't1', coding: 'c1' },
  markNone: { place, drawnBy: 'in order', seenSuggestion: false },
  clearNone: { transcript: 't1', none: 'n1' },
  moveCoding: {
    transcript: 't1',
    coding: 'c1',
    theme: 'b',
    drawnBy: 'in order',
    seenSuggestion: false,
  },
  codeTogether: { places: [place], theme: 'a', drawnBy: 'in order', seenSuggestion: false },
  drawSample: { kind: 'cold sample', count: 40, seed: 7, unreadOnly: false },
  scoreColdSample: null,
  readingEvidence: null,
  search: { text: 'boat', mode: 'near', within: 5, order: 'left', from: 0, count: 200 },
  readingKept: null,
  keepReading: {
    preferences: { suggestions: true, goOn: false, singleKeys: true, keys: { next: 'x' } },
    stopped: {
      kind: 'random draw',
      unreadOnly: true,
      count: 60,
      seed: 7,
      theme: -1,
      only: -1,
      transcript: 0,
      start: 12,
    },
  },
  writeMemo: { on: { kind: 'passage', place }, text: 'A memo.' },
  reviseMemo: { memo: 'm1', text: '' },
  find: { text: 'boat' },
  reportPreview: { standings: ['confirmed'], themes: null, guard: true },
  report: { standings: ['by hand'], themes: ['a'], guard: false, format: 'themes csv' },
  verifyStudy: { head: null },
  trailView: { by: null, kind: null, since: null, theme: null },
  trailFile: { by: 'Ada', kind: 'codingMade', since: '2026', theme: 'a', format: 'csv' },
  withdrawalView: { participant: 'p', names: ['Ruth'] },
  withdrawParticipant: { participant: 'p', names: [], refit: true },
  sealView: null,
  sealOriginals: { names: ['Ruth'], refit: false },
  takeInView: { path: '/a/b.understory', password: null },
  takeIn: { path: '/a/b.understory', password: 'secret', head: 'ab', choices: { c: 'both' } },
  saveFile: { fileName: 'excerpts.csv', bytes },
};

const accepts = (method: Method, takes: unknown): boolean =>
  v.safeParse(payloads[method], takes).success;

describe.each(methods)('the payload of %s', (method) => {
  const sample: unknown = samples[method];

  it('is taken as the api says', () => {
    expect(v.parse(payloads[method], sample)).toEqual(sample);
  });

  it('is refused as another kind of value', () => {
    const wrong = [
      undefined,
      0,
      'text',
      [],
      [null],
      true,
      ...(sample === null ? [{}] : [null, {}]),
    ];
    expect(wrong.filter((takes) => accepts(method, takes))).toEqual([]);
  });

  it('is refused with a key too many, a key too few or a value of another kind', () => {
    if (sample === null) return;
    const fields = Object.entries(sample as object);
    expect(accepts(method, { ...(sample as object), more: 1 })).toBe(false);
    for (const [key] of fields) {
      const others = fields.filter(([other]) => other !== key);
      expect(accepts(method, Object.fromEntries(others)), `without ${key}`).toBe(false);
      const wrong = { ...(sample as object), [key]: Symbol.iterator };
      expect(accepts(method, wrong), `wrong ${key}`).toBe(false);
    }
  });
});

describe('limits on payloads', () => {
  it('refuse names, texts, lists and files beyond them', () => {
    const name = 'a'.repeat(limits.name + 1);
    expect(accepts('renameStudy', { name })).toBe(false);
    expect(accepts('renameStudy', { name: name.slice(1) })).toBe(true);
    expect(accepts('reviseMemo', { memo: 'm', text: 'a'.repeat(limits.text + 1) })).toBe(false);
    const from = Array.from({ length: limits.list + 1 }, () => 'b');
    expect(accepts('mergeThemes', { into: 'a', from })).toBe(false);
    const large = new Uint8Array(limits.fileBytes + 1);
    expect(accepts('addAttributes', { name: 'a', bytes: large })).toBe(false);
  });

  it('refuse numbers that are no count and no offset', () => {
    for (const themes of [0, -1, 1.5, Number.NaN, Number.POSITIVE_INFINITY, 1e9, '12']) {
      expect(accepts('fit', { kind: 're-fit', themes }), String(themes)).toBe(false);
    }
    for (const [start, end] of [
      [-1, 3],
      [5, 3],
      [0.5, 3],
      [0, 2 ** 60],
    ]) {
      expect(accepts('passageView', { place: { transcript: 't', start, end } })).toBe(false);
    }
    expect(accepts('changeSettings', { settings: { themes: Number.NaN } })).toBe(false);
  });

  it('refuse what is not among the words of the api', () => {
    expect(accepts('fit', { kind: 'anew', themes: null })).toBe(false);
    expect(accepts('report', { ...samples.report, format: 'pdf' })).toBe(false);
    expect(accepts('writeMemo', { on: { kind: 'theme', transcript: 't' }, text: '' })).toBe(false);
    expect(accepts('saveFile', { fileName: '', bytes })).toBe(false);
  });

  it('do not let a payload reach the prototype of objects', () => {
    const takes: unknown = JSON.parse(
      '{"participant":"p","name":"P","attributes":{"__proto__":"x"}}',
    );
    const result = v.safeParse(payloads.describeParticipant, takes);
    expect(result.success && Object.keys(result.output.attributes)).toEqual([]);
    expect(Object.hasOwn(Object.prototype, 'x')).toBe(false);
  });
});
