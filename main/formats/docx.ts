import { strFromU8, strToU8, zipSync } from 'fflate';
import mammoth from 'mammoth';
import { readParts, type Archive } from './archive.ts';
import { mostTextBytes, tooLarge } from './limits.ts';
import type { ReadDocument, ReadRefusal, SideNote } from './read-file.ts';
import { hasDoctype } from './xml.ts';

export const documentPart = 'word/document.xml';

const broken: ReadRefusal = { ok: false, code: 'broken file', format: 'docx' };

/**
 * The text of a Word document: a line a paragraph, line breaks inside a paragraph as they are, table
 * cells of a row with tabs between them. Tracked changes are taken as accepted; comments, footnotes
 * and endnotes stand beside; headers and footers are left out; nothing outside the file is followed.
 */
export async function readDocx(archive: Archive): Promise<ReadDocument> {
  const parts = readParts(archive, isText, mostTextBytes);
  if (parts === 'too large') return tooLarge(null);
  if (parts === 'broken' || !Object.hasOwn(parts, documentPart)) return broken;
  // The format allows no document type, and with it no entities (ECMA-376, part 2).
  if (Object.values(parts).some(hasDoctype)) return broken;
  let document: Element | undefined;
  try {
    await mammoth.convertToHtml(
      { buffer: Buffer.from(repacked(parts)) },
      {
        externalFileAccess: false,
        ignoreEmptyParagraphs: false,
        convertImage: mammoth.images.imgElement(() => Promise.resolve({ src: '' })),
        // The document as it was read, before it is turned into anything.
        transformDocument: (element: Element) => {
          document = element;
          return { ...element, children: [] };
        },
      },
    );
    if (document === undefined) return broken;
    return { ok: true, text: blocksOf(document).join('\n'), notes: notesOf(document) };
  } catch {
    return broken;
  }
}

/** Only the parts that hold text; no pictures, no programs, nothing embedded. */
function isText(name: string): boolean {
  return /\.(?:xml|rels)$/u.test(name) && !/\/(?:media|embeddings|theme)\//u.test(name);
}

/**
 * For the library: these elements only wrap runs, but it would leave out what is in them. Its reader
 * is handed nothing but what was unpacked within limits.
 */
function repacked(parts: Record<string, Uint8Array>): Uint8Array {
  const xml = strFromU8(parts[documentPart]!);
  const wrapper = /<\/?w:(?:fldSimple|dir|bdo|moveTo)(?:\s[^<>]*)?>/g;
  return zipSync({ ...parts, [documentPart]: strToU8(xml.replace(wrapper, '')) }, { level: 0 });
}

/** What the library makes of an element of the document, as far as it is looked at here. */
interface Element {
  readonly type: string;
  readonly value?: string;
  readonly breakType?: string;
  readonly children?: readonly Element[];
  readonly noteType?: string;
  readonly commentId?: string;
  readonly body?: readonly Element[];
  readonly authorName?: string | null;
  readonly notes?: { resolve(reference: Element): Element | undefined };
  readonly comments?: readonly Element[];
}

/** The lines of paragraphs and tables, in order. */
function blocksOf(element: Element): string[] {
  const blocks: string[] = [];
  for (const child of element.children ?? []) {
    if (child.type === 'paragraph') blocks.push(inline(child));
    else if (child.type === 'tableRow') blocks.push(rowOf(child));
    else blocks.push(...blocksOf(child));
  }
  return blocks;
}

function rowOf(row: Element): string {
  return (row.children ?? []).map((cell) => blocksOf(cell).join('\n').trim()).join('\t');
}

function inline(element: Element): string {
  if (element.type === 'text') return (element.value ?? '').replace(/\r\n?/g, '\n');
  if (element.type === 'tab') return '\t';
  if (element.type === 'break') return '\n';
  if (element.type === 'noteReference' || element.type === 'commentReference') return '';
  return (element.children ?? []).map(inline).join('');
}

function notesOf(document: Element): SideNote[] {
  const notes: SideNote[] = [];
  const add = (kind: SideNote['kind'], note: Element | undefined): void => {
    const text = blocksOf({ type: 'note', children: note?.body ?? [] })
      .join('\n')
      .trim();
    if (text !== '') notes.push({ kind, by: note?.authorName ?? null, text });
  };
  const visit = (element: Element): void => {
    if (element.type === 'noteReference') {
      add(
        element.noteType === 'endnote' ? 'endnote' : 'footnote',
        document.notes?.resolve(element),
      );
    }
    for (const child of element.children ?? []) visit(child);
  };
  visit(document);
  for (const comment of document.comments ?? []) add('comment', comment);
  return notes;
}
