import { parse } from 'csv-parse/sync';
import type { Edit, Study } from '../../engine/study/index.ts';

export interface AttributeTable {
  /** Column headings after the one that names the person. */
  readonly columns: readonly string[];
  readonly rows: readonly { readonly person: string; readonly values: readonly string[] }[];
}

/**
 * A table of attributes: its first heading is "participant", each further column an attribute.
 * Null where the text is no such table.
 */
export function readAttributeTable(text: string): AttributeTable | null {
  // Spreadsheets write semicolons where a comma is the decimal sign.
  for (const delimiter of [',', ';', '\t']) {
    const table = readWith(delimiter, text);
    if (table !== null) return table;
  }
  return null;
}

/** The same of rows of cells; null where they are no table of attributes. */
export function attributeTableIn(rows: readonly (readonly string[])[]): AttributeTable | null {
  const [head, ...body] = rows;
  if (head === undefined || head.length < 2 || nameKey(head[0]) !== 'participant') return null;
  return {
    columns: head.slice(1).map((heading) => heading.trim()),
    rows: body.map(([person, ...values]) => ({ person: person.trim(), values })),
  };
}

function readWith(delimiter: string, text: string): AttributeTable | null {
  let rows: string[][];
  try {
    rows = parse(text, { bom: true, delimiter, relax_column_count: true, skip_empty_lines: true });
  } catch {
    return null;
  }
  return attributeTableIn(rows);
}

/** Edits that describe the participants found in the table, and the names that were not found. */
export function attributeEdits(
  study: Study,
  table: AttributeTable,
): { readonly edits: Edit[]; readonly unmatched: string[] } {
  const byName = new Map([...study.participants.values()].map((one) => [nameKey(one.name), one]));
  const edits: Edit[] = [];
  const unmatched: string[] = [];
  const seen = new Set<string>();
  for (const { person, values } of table.rows) {
    const participant = byName.get(nameKey(person));
    if (participant === undefined || seen.has(participant.id)) {
      if (person !== '') unmatched.push(person);
      continue;
    }
    seen.add(participant.id);
    const attributes = { ...participant.attributes };
    table.columns.forEach((column, index) => {
      const value = (values[index] ?? '').trim();
      // "transcript" only helps a person who reads the table; it is no attribute of anyone.
      if (value !== '' && nameKey(column) !== 'transcript' && column !== '') {
        attributes[column] = value;
      }
    });
    edits.push({
      kind: 'participantDescribed',
      participant: participant.id,
      from: { name: participant.name, attributes: participant.attributes },
      to: { name: participant.name, attributes },
    });
  }
  return { edits, unmatched };
}

function nameKey(name: string): string {
  return name.normalize('NFC').trim().toLowerCase();
}
