import type {
  Answer,
  Api,
  Events,
  GatherView,
  Link,
  Method,
  Overview,
  ParticipantRow,
  ReportPreview,
  Role,
  SpeakerView,
  ThemeRowView,
  TranscriptRow,
  TurnView,
} from '../../../main/api.ts';

export interface FakeOptions {
  readonly transcripts?: number;
  readonly themes?: number;
  readonly fitted?: boolean;
  readonly confirmed?: number;
  readonly stale?: boolean;
  readonly dialogs?: boolean;
  readonly readOnly?: boolean;
  readonly transcriptsRead?: number;
  /** Names of 120 characters, labels from right to left, an attribute that explains itself. */
  readonly long?: boolean;
}

type Gives<Name extends Method> = Answer<Api[Name]['gives']>;
type Handlers = {
  [Name in Method]?: (takes: Api[Name]['takes']) => Gives<Name> | Promise<Gives<Name>>;
};

export interface FakeLink extends Link {
  /** Every call so far, in order. */
  readonly calls: { readonly method: Method; readonly takes: unknown }[];
  /** Answers the next calls of a method in another way. */
  answer<Name extends Method>(method: Name, handler: Handlers[Name]): void;
}

const longName =
  'Interview with the former harbour office clerk and her brother about winter crossings, second sitting, Skellwick hall 2026';
const said = [
  'Well. You look at the sheet on the pier and you think, that is the week gone, then.',
  'My sister rang on the Monday and there was nothing till the Thursday, so she stayed over there and we did without.',
  'They did ask us. They asked us in the hall, in July, when half of us were at the fishing. [laughs] Grand meeting, that.',
  'I do not like to say it, but you get used to asking. And then you stop asking, and that is worse.',
];
const asked = ['And how do you manage now?', 'Mm-hm.', 'What happened then, in that week?'];

/**
 * A study in memory behind the link, for Gather and Report: enough of it to see every state and to
 * make every decision. The texts are invented.
 */
export function fakeGather(options: FakeOptions = {}): FakeLink {
  const { transcripts: count = 12, themes: themeCount = 9, long = false } = options;
  const listeners = new Map<keyof Events, Set<(detail: never) => void>>();
  const calls: { method: Method; takes: unknown }[] = [];
  let revision = 1;
  let rows: TranscriptRow[] = [];
  let people: ParticipantRow[] = [];
  let settings: GatherView['settings'] = {
    themes: 12,
    language: 'eng',
    languages: [
      { code: 'eng', name: 'English' },
      { code: 'deu', name: 'German' },
    ],
    stemming: false,
    passageMinimumWords: 40,
    passageMaximumWords: 140,
    extraStopWords: [],
  };
  for (let index = 0; index < count; index++) gatherOne(`P${String(index + 1).padStart(2, '0')}`);

  function gatherOne(code: string): void {
    const index = rows.length;
    const odd = index % 5 === 3;
    const name = long && index % 3 === 0 ? `${longName} ${code}` : `${code} ${place(index)}`;
    const person = { id: `person-${code}`, name: long && index === 1 ? longName : code };
    const label = long && index === 2 ? 'مريم' : code;
    const asking: SpeakerView = {
      label: long && index === 0 ? `Interviewer: ${longName}` : 'I',
      role: odd ? 'participant' : 'interviewer',
      participant: odd ? { id: `person-I-${code}`, name: `${name}, I` } : null,
      turns: 31 + (index % 7),
      words: 640,
    };
    const words = 2214 + index * 137;
    rows.push({
      id: `transcript-${code}`,
      name,
      fileName: `${name}.docx`,
      format: 'docx',
      words,
      passages: Math.round(words / 70),
      speakers: [
        asking,
        { label, role: 'participant', participant: person, turns: 44 + (index % 3), words },
      ],
      needsLook: odd ? ['No interviewer was recognised', `No attributes for ${code}`] : [],
      codings: index % 4 === 0 ? 12 : 0,
    });
    people.push({
      ...person,
      attributes:
        index === 6
          ? {}
          : {
              'age band': '50-64',
              village: 'Skellwick',
              ...(long
                ? { 'how long they have lived on the island, counting years away': '31' }
                : {}),
            },
      transcripts: [`transcript-${code}`],
      words,
    });
  }

  function overview(): Overview {
    const fitted = options.fitted ?? false;
    const passages = rows.reduce((sum, row) => sum + row.passages, 0);
    return {
      study: {
        id: 'study-1',
        name: long ? longName : 'Winter timetable',
        path: '/studies/w.understory',
      },
      hasPassword: false,
      readOnly: options.readOnly ?? false,
      savedAt: '2026-03-02T10:42:00Z',
      revision,
      transcripts: rows.length,
      words: rows.reduce((sum, row) => sum + row.words, 0),
      themes: fitted ? themeCount : 0,
      passages,
      unread: passages,
      transcriptsRead: options.transcriptsRead ?? 0,
      fitted,
      refining: null,
      stale: options.stale ?? false,
      waiting: [],
      followChanges: false,
      undo: null,
      redo: null,
      reader: { id: 'reader-1', name: 'Ada' },
      coldSample: null,
    };
  }

  function decided(): { readonly value: Overview } {
    revision++;
    const now = overview();
    for (const listener of listeners.get('changed') ?? []) listener(now as never);
    return { value: now };
  }

  function assign(transcript: string, label: string | null, role: Role, name: string | null): void {
    rows = rows.map((row) =>
      row.id !== transcript
        ? row
        : {
            ...row,
            needsLook: [],
            speakers: row.speakers.map((speaker) =>
              speaker.label !== label
                ? speaker
                : {
                    ...speaker,
                    role,
                    participant:
                      role === 'participant' ? personOf(name ?? label ?? row.name) : null,
                  },
            ),
          },
    );
  }

  function personOf(name: string): { id: string; name: string } {
    const known = people.find((one) => one.name === name);
    if (known !== undefined) return known;
    const one = { id: `person-${name}`, name, attributes: {}, transcripts: [], words: 0 };
    people = [...people, one];
    return one;
  }

  const themes = Array.from({ length: themeCount }, (_, index): ThemeRowView => ({
    id: `theme-${index}`,
    name: index % 3 === 2 ? null : themeName(index, long),
    label: index % 3 === 2 ? 'letter, form, post, stamp' : themeName(index, long),
    code: '',
    heading: null,
    origin: 'fitted',
    pinned: false,
    setAside: false,
    modelled: true,
    share: 0.1,
    words: ['letter', 'form'],
    confirmedPeople: 3,
    suggestedPeople: 5,
    codings: 4 + index,
    suggestions: 12,
  }));

  function preview({ standings, themes: wanted }: Api['reportPreview']['takes']): ReportPreview {
    const taken = themes.filter(({ id }) => wanted === null || wanted.includes(id));
    const each = (options.confirmed ?? 0) + (standings.includes('suggested') ? 6 : 0);
    const total = standings.length === 0 ? 0 : each * taken.length;
    return {
      count: total,
      people: total === 0 ? 0 : 9,
      filter: `${total} coded excerpts; standing: ${standings.join(', ')}.`,
      themes:
        total === 0
          ? []
          : taken.map(({ id, label }) => ({ id, label, count: each, people: Math.min(each, 9) })),
      excerpts:
        total === 0
          ? []
          : taken.slice(0, 4).flatMap(({ label }, theme) =>
              said.slice(0, 3).map((text, index) => {
                const standing =
                  index === 2 && standings.includes('suggested') ? 'suggested' : 'confirmed';
                return {
                  theme: label,
                  question: index === 1 ? '' : 'And how do you manage now?',
                  text: theme === 1 ? `${text}\n${said[3]}` : text,
                  attribution: `P0${index + 1} · P0${index + 1} harbour café · passage 12 · 00:12:31 · ${standing}`,
                  standing,
                };
              }),
            ),
      cautions: [
        'Read every excerpt for what could identify a person before you share it: stand-ins are pseudonyms, not anonymity. The consent given, the ethics board’s decision and local law come first.',
        'Suggestions come from a model that counts words; they are for reading, never findings.',
      ],
    };
  }

  const handlers: Handlers = {
    about: () => ({
      value: {
        version: '0.1.0',
        shell: 'browser',
        dialogs: options.dialogs ?? false,
        studiesFolder: '/studies',
        platform: 'linux',
        locale: 'en',
      },
    }),
    overview: () => ({ value: overview() }),
    recentStudies: () => ({ value: [] }),
    gatherView: () => ({
      value: {
        transcripts: rows,
        participants: people,
        attributes: [...new Set(people.flatMap(({ attributes }) => Object.keys(attributes)))],
        settings,
        fieldNotes: [],
        memos: [],
      },
    }),
    counted: () => ({
      value: rows.length === 0 ? null : { passages: 431, words: 9122, forms: 1204, tooShort: 37 },
    }),
    transcriptView: ({ transcript }) => {
      const row = rows.find(({ id }) => id === transcript);
      if (row === undefined) return { refused: 'There is no such transcript.', code: 'unknown' };
      let text = '';
      const turns: TurnView[] = [];
      for (let index = 0; index < 80; index++) {
        const speaker = row.speakers[index % row.speakers.length];
        const words = index % 2 === 0 ? asked[index % asked.length] : said[index % said.length];
        turns.push({
          start: text.length,
          end: text.length + words.length,
          speaker: speaker.label,
          role: speaker.role,
          time: index * 17_000,
        });
        text += `${words}\n`;
      }
      return {
        value: {
          id: row.id,
          name: row.name,
          text,
          details: [
            { name: 'Date', value: '3 May 2026' },
            { name: 'Place', value: 'harbour café, upstairs' },
          ],
          turns,
          passages: [],
          words: row.words,
          fieldNotes: [],
          memos: [],
        },
      };
    },
    addTranscripts: ({ files }) => {
      const bad = files.filter(({ name }) => /\.(pdf|csv)$/u.test(name));
      for (const file of files) {
        if (!bad.includes(file)) gatherOne(file.name.replace(/\.\w+$/u, ''));
      }
      decided();
      return {
        value: {
          gathered: files.filter((file) => !bad.includes(file)).map(({ name }) => name),
          skipped: bad.map(({ name }) => ({
            file: name,
            sentence:
              'Files of this kind are not read. Save the transcript as .txt, .docx, .vtt or .srt.',
          })),
          attributes: null,
          tables: [],
          doubles: [],
        },
      };
    },
    addAttributes: () => {
      decided();
      return { value: { described: 11, unmatched: ['P1O', 'Ansel Pike'] } };
    },
    renameTranscript: ({ transcript, name }) => {
      if (rows.some((row) => row.name === name)) {
        return { refused: `The name “${name}” is taken. Choose another one.`, code: 'name taken' };
      }
      rows = rows.map((row) => (row.id === transcript ? { ...row, name } : row));
      return decided();
    },
    removeTranscript: ({ transcript }) => {
      rows = rows.filter(({ id }) => id !== transcript);
      return decided();
    },
    assignSpeaker: ({ transcript, label, role, participant, everywhere }) => {
      for (const { id } of everywhere ? rows : rows.filter((row) => row.id === transcript)) {
        assign(id, label, role, participant);
      }
      return decided();
    },
    describeParticipant: ({ participant, name, attributes }) => {
      people = people.map((one) => (one.id === participant ? { ...one, name, attributes } : one));
      return decided();
    },
    changeSettings: ({ settings: given }) => {
      for (const [key, value] of Object.entries(given)) {
        settings = { ...settings, [key.replace(/^text\./u, '')]: value };
      }
      return decided();
    },
    shapeView: () => ({
      value: { themes, headings: [], people: rows.length, fit: null, fits: [], before: null },
    }),
    reportPreview: (takes) => ({ value: preview(takes) }),
    report: ({ format }) => ({
      value: { fileName: `coded-excerpts.${format}`, bytes: new Uint8Array([97]) },
    }),
    saveFile: ({ fileName }) => ({ value: `/home/ada/${fileName}` }),
  };

  return {
    calls,
    answer(method, handler) {
      handlers[method] = handler;
    },
    async call(method, takes) {
      calls.push({ method, takes });
      const handler = handlers[method];
      await Promise.resolve();
      if (handler === undefined)
        return { refused: `Not in this stand-in: ${method}`, code: 'none' };
      return handler(takes);
    },
    on(event, listener) {
      const own = listeners.get(event) ?? new Set();
      listeners.set(event, own.add(listener as (detail: never) => void));
      return () => own.delete(listener as (detail: never) => void);
    },
  };
}

function place(index: number): string {
  return ['ferry clerk', 'crofter', 'harbour café', 'teacher', 'guest house', 'couple'][index % 6];
}

function themeName(index: number, long: boolean): string {
  if (long && index === 1) return `Getting to appointments, and ${longName.toLowerCase()}`;
  return (
    ['Getting to appointments', 'The school week', '', 'Shelves, freight and fuel'][index % 4] ||
    `Theme ${index + 1}`
  );
}
