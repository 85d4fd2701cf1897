import type { Archive } from './archive.ts';
import { mostTextBytes, tooLarge } from './limits.ts';
import type { ReadDocument, SideNote } from './read-file.ts';
import { walkXml } from './xml.ts';

const contentPart = 'content.xml';

/** What is no text of the document: what was deleted, and what only describes or repeats. */
const passedOver: ReadonlySet<string> = new Set([
  'text:tracked-changes',
  'text:ruby-text',
  'text:note-citation',
  'text:sequence-decls',
  'text:variable-decls',
  'text:user-field-decls',
  'office:forms',
  'office:scripts',
  'office:font-face-decls',
  'office:automatic-styles',
  'svg:title',
  'svg:desc',
  'math',
  'math:math',
]);

/** Where paragraphs are gathered: the text itself, a cell, or a note. */
interface Place {
  readonly blocks: string[];
  /** The paragraph in hand; null between paragraphs. */
  line: string | null;
  /** Whether white space at this point would follow white space, and so counts for nothing. */
  spaced: boolean;
}

interface Note extends Place {
  readonly kind: SideNote['kind'];
  by: string;
}

/**
 * The text of an OpenDocument text (OASIS OpenDocument 1.3): a line a paragraph or heading, line
 * breaks and tabs as they are, table cells of a row with tabs between them. Tracked changes are taken
 * as accepted; comments and notes stand beside; headers and footers are left out.
 */
export function readOdt(archive: Archive): ReadDocument {
  const manifest = archive.read('META-INF/manifest.xml', 1_000_000);
  if (manifest instanceof Uint8Array && isEncrypted(manifest)) {
    return { ok: false, code: 'locked file' };
  }
  const content = archive.read(contentPart, mostTextBytes);
  if (content === 'too large') return tooLarge(null);
  if (content === null) return { ok: false, code: 'broken file', format: 'odt' };

  const body = newPlace();
  const places: Place[] = [body];
  const rows: string[][] = [];
  const notes: SideNote[] = [];
  let skipping = 0;
  let namingAuthor = false;
  let inside = false;
  const here = (): Place => places[places.length - 1]!;
  const add = (text: string): void => {
    const place = here();
    if (place.line === null) return;
    place.line += text;
    place.spaced = text === '\n' || text === '\t';
  };

  const whole = walkXml(content, {
    open(name, attributes) {
      if (skipping > 0 || passedOver.has(name)) {
        skipping++;
        return;
      }
      switch (name) {
        case 'office:text':
          inside = true;
          break;
        case 'text:p':
        case 'text:h':
          // A paragraph inside a paragraph stands in a frame: on a line of its own.
          endLine(here());
          here().line = '';
          here().spaced = true;
          break;
        case 'text:s':
          add(' '.repeat(countOf(attributes['text:c'])));
          break;
        case 'text:tab':
          add('\t');
          break;
        case 'text:line-break':
          add('\n');
          break;
        case 'table:table-row':
          rows.push([]);
          break;
        case 'table:table-cell':
        case 'table:covered-table-cell':
          places.push(newPlace());
          break;
        case 'text:note':
          places.push(
            newNote(attributes['text:note-class'] === 'endnote' ? 'endnote' : 'footnote'),
          );
          break;
        case 'office:annotation':
          places.push(newNote('comment'));
          break;
        case 'dc:creator':
          namingAuthor = true;
          break;
        case 'dc:date':
        case 'meta:date-string':
        case 'meta:creator-initials':
          skipping++;
          break;
      }
    },
    close(name) {
      if (skipping > 0) {
        skipping--;
        return;
      }
      switch (name) {
        case 'office:text':
          inside = false;
          break;
        case 'text:p':
        case 'text:h':
          endLine(here());
          break;
        case 'table:table-cell':
        case 'table:covered-table-cell': {
          const cell = places.pop()!;
          endLine(cell);
          rows[rows.length - 1]?.push(cell.blocks.join('\n').trim());
          break;
        }
        case 'table:table-row':
          here().blocks.push((rows.pop() ?? []).join('\t'));
          break;
        case 'text:note':
        case 'office:annotation': {
          const note = places.pop() as Note;
          endLine(note);
          const text = note.blocks.join('\n').trim();
          const by = note.by.trim() === '' ? null : note.by.trim();
          if (text !== '') notes.push({ kind: note.kind, by, text });
          break;
        }
        case 'dc:creator':
          namingAuthor = false;
          break;
      }
    },
    text(text) {
      if (skipping > 0 || !inside) return;
      const place = here();
      if (namingAuthor) {
        if ('by' in place) (place as Note).by += text;
        return;
      }
      if (place.line === null) return;
      // White space counts once, and not at all where a paragraph begins.
      const collapsed = text.replace(/[ \t\r\n]+/gu, ' ');
      const shown = place.spaced ? collapsed.replace(/^ /u, '') : collapsed;
      if (shown === '') return;
      place.line += shown;
      place.spaced = shown.endsWith(' ');
    },
  });
  if (!whole) return { ok: false, code: 'broken file', format: 'odt' };
  return { ok: true, text: body.blocks.join('\n'), notes };
}

function newPlace(): Place {
  return { blocks: [], line: null, spaced: true };
}

function newNote(kind: SideNote['kind']): Note {
  return { ...newPlace(), kind, by: '' };
}

function endLine(place: Place): void {
  if (place.line === null) return;
  place.blocks.push(place.line);
  place.line = null;
}

const mostSpaces = 1_000;

function countOf(count: string | undefined): number {
  const number = count === undefined ? 1 : Number(count);
  return Number.isInteger(number) && number > 0 ? Math.min(number, mostSpaces) : 1;
}

function isEncrypted(manifest: Uint8Array): boolean {
  let encrypted = false;
  walkXml(manifest, {
    open: (name) => {
      if (name.endsWith(':encryption-data') || name === 'encryption-data') encrypted = true;
    },
    close: () => {},
    text: () => {},
  });
  return encrypted;
}
