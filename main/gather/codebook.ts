import {
  emptyDefinition,
  nameKey,
  type Definition,
  type Edit,
  type Study,
  type Theme,
} from '../../engine/study/index.ts';
import { decode, readCsv, walkXml } from '../formats/index.ts';
import type { MintId } from '../ids.ts';

/** One code of a codebook that was made elsewhere. */
export interface CodebookEntry {
  readonly name: string;
  /** The heading that it stands under; null where it stands alone. */
  readonly heading: string | null;
  readonly definition: Definition;
  /** Words to seed it with. */
  readonly seeds: readonly string[];
}

export type CodebookRead =
  | { readonly ok: true; readonly entries: readonly CodebookEntry[] }
  | { readonly ok: false; readonly code: 'no codebook' };

/**
 * A codebook in a table (its first row names the columns: name, heading, code, brief, full, when to
 * use, when not to use, examples, words) or in the open exchange format for codebooks (XML with the
 * namespace urn:QDA-XML:codebook:1.0). Colours, ids and sets are left aside.
 */
export function readCodebook(bytes: Uint8Array): CodebookRead {
  const decoded = decode(bytes);
  if (!decoded.ok) return { ok: false, code: 'no codebook' };
  const entries = decoded.text.trimStart().startsWith('<')
    ? entriesInXml(bytes)
    : entriesInTable(decoded.text);
  const named = unique(entries);
  return named.length === 0 ? { ok: false, code: 'no codebook' } : { ok: true, entries: named };
}

/** Codes of one name are one: two branches may well have a code "Other". */
function unique(entries: readonly CodebookEntry[]): CodebookEntry[] {
  const times = new Map<string, number>();
  for (const { name } of entries) times.set(nameKey(name), (times.get(nameKey(name)) ?? 0) + 1);
  const taken = new Set<string>();
  return entries.flatMap((entry) => {
    const several = times.get(nameKey(entry.name))! > 1 && entry.heading !== null;
    const name = several ? `${entry.heading ?? ''}: ${entry.name}` : entry.name;
    if (taken.has(nameKey(name))) return [];
    taken.add(nameKey(name));
    return [{ ...entry, name }];
  });
}

interface OpenCode {
  readonly name: string;
  readonly codable: boolean;
  description: string;
  children: number;
  place: number;
}

function entriesInXml(bytes: Uint8Array): CodebookEntry[] {
  const entries: (CodebookEntry | null)[] = [];
  const codes: OpenCode[] = [];
  let isCodebook = false;
  let describing = false;
  const local = (name: string): string => name.slice(name.indexOf(':') + 1);
  const whole = walkXml(bytes, {
    open(name, attributes) {
      const kind = local(name);
      if (kind === 'CodeBook') isCodebook = true;
      if (kind === 'Code') {
        const parent = codes[codes.length - 1];
        if (parent !== undefined) parent.children++;
        codes.push({
          name: (attributes['name'] ?? '').replace(/\s+/gu, ' ').trim(),
          codable: attributes['isCodable'] !== 'false',
          description: '',
          children: 0,
          place: entries.length,
        });
        // Its place in the list, before its children.
        entries.push(null);
      }
      describing = kind === 'Description' && codes.length > 0;
    },
    close(name) {
      const kind = local(name);
      if (kind === 'Description') describing = false;
      if (kind !== 'Code') return;
      const code = codes.pop()!;
      if (code.name === '' || !code.codable) return;
      const top = codes[0]?.name ?? (code.children > 0 ? code.name : '');
      entries[code.place] = {
        name: code.name,
        heading: top === '' ? null : top,
        definition: { ...emptyDefinition, brief: code.description.trim() },
        seeds: [],
      };
    },
    text(text) {
      if (describing) codes[codes.length - 1]!.description += text;
    },
  });
  if (!whole || !isCodebook) return [];
  return entries.filter((entry) => entry !== null);
}

type Part = 'name' | 'heading' | 'seeds' | keyof Definition;

const columnNames: Readonly<Record<Part, readonly string[]>> = {
  name: ['name', 'theme', 'code name', 'label', 'title', 'kategorie', 'thema', 'thème', 'tema'],
  heading: ['heading', 'parent', 'under', 'group', 'category', 'oberkategorie'],
  seeds: ['words', 'seeds', 'seed words', 'keywords'],
  code: ['code', 'short', 'abbreviation', 'id'],
  brief: ['brief', 'brief definition', 'definition', 'description', 'beschreibung', 'descripción'],
  full: ['full', 'full definition', 'long definition', 'details'],
  whenToUse: ['when to use', 'use', 'inclusion', 'inclusion criteria', 'include'],
  whenNotToUse: ['when not to use', 'exclusion', 'exclusion criteria', 'exclude'],
  examples: ['example', 'examples', 'quote', 'quotes', 'anchor example', 'ankerbeispiel'],
};

function entriesInTable(text: string): CodebookEntry[] {
  const read = readCsv(text);
  const rows =
    read?.ok === true
      ? read.value.sheets[0]!.rows
      : // One column: a name a line.
        text
          .split('\n')
          .filter((line) => line.trim() !== '')
          .map((line) => [line.trim().replace(/^"(.*)"$/u, '$1')]);
  const [headings = [], ...body] = rows;
  const plain = headings.map((heading) =>
    heading
      .toLowerCase()
      .replace(/[\s_-]+/gu, ' ')
      .trim(),
  );
  const at = (part: Part): number => plain.findIndex((one) => columnNames[part].includes(one));
  // A codebook in which the codes are the names.
  const name = at('name') >= 0 ? at('name') : at('code');
  if (name < 0) return [];
  const cell = (row: readonly string[], part: Part): string => {
    const column = at(part);
    return column < 0 || column === name ? '' : (row[column] ?? '').trim();
  };
  return body.flatMap((row) => {
    const given = (row[name] ?? '').replace(/\s+/gu, ' ').trim();
    if (given === '') return [];
    const code = cell(row, 'code');
    return [
      {
        name: given,
        heading: cell(row, 'heading') || null,
        definition: {
          ...(code === '' ? {} : { code }),
          brief: cell(row, 'brief'),
          full: cell(row, 'full'),
          whenToUse: cell(row, 'whenToUse'),
          whenNotToUse: cell(row, 'whenNotToUse'),
          examples: cell(row, 'examples'),
        },
        seeds: cell(row, 'seeds')
          .split(/[\s,;]+/u)
          .filter((word) => word !== ''),
      },
    ];
  });
}

/** The names among the entries that a theme of the study has already. */
export function namesTaken(study: Study, entries: readonly CodebookEntry[]): ReadonlySet<string> {
  const taken = new Set([...study.themes.values()].map((theme) => nameKey(theme.name ?? '')));
  return new Set(entries.map(({ name }) => name).filter((name) => taken.has(nameKey(name))));
}

/**
 * Edits that bring entries in as themes: to be looked for by the model, each from its words (as
 * `seedsOf` gives them), or to be used by hand. Those whose names are taken are passed over.
 */
export function codebookEdits(
  study: Study,
  entries: readonly CodebookEntry[],
  byHand: boolean,
  seedsOf: (entry: CodebookEntry) => readonly string[],
  mintId: MintId,
): Edit[] {
  const taken = namesTaken(study, entries);
  const headings = new Map([...study.headings.values()].map((one) => [nameKey(one.name), one.id]));
  const edits: Edit[] = [];
  for (const entry of entries) {
    const { name, heading, definition } = entry;
    if (taken.has(name)) continue;
    const id = mintId('theme');
    const theme: Theme = {
      id,
      name,
      origin: byHand ? 'by hand' : 'asked for',
      definition,
      version: 1,
      pinned: false,
      setAside: false,
      mergedInto: null,
      seeds: [],
      shutOut: [],
    };
    edits.push({ kind: 'themeAdded', theme });
    if (!byHand) {
      const words = [...new Set(seedsOf(entry))];
      edits.push(...words.map((word): Edit => ({ kind: 'wordSeeded', theme: id, word })));
    }
    if (heading === null) continue;
    let under = headings.get(nameKey(heading));
    if (under === undefined) {
      under = mintId('heading');
      headings.set(nameKey(heading), under);
      edits.push({ kind: 'headingAdded', heading: { id: under, name: heading }, place: null });
    }
    edits.push({ kind: 'themePutUnder', theme: id, from: null, to: under });
  }
  return edits;
}
