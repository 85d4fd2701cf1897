import { strFromU8, strToU8, unzipSync, zipSync } from 'fflate';
import mammoth from 'mammoth';
import type { ReadRefusal } from './read-file.ts';

const documentPart = 'word/document.xml';
const mostMegabytes = 200;

/** The names of the files in an archive, with how large they say they are; null where it is broken. */
export function listArchive(bytes: Uint8Array): { name: string; size: number }[] | null {
  const files: { name: string; size: number }[] = [];
  try {
    unzipSync(bytes, {
      filter: ({ name, originalSize }) => {
        files.push({ name, size: originalSize });
        return false;
      },
    });
  } catch {
    return null;
  }
  return files;
}

/**
 * The text of a Word document: a line a paragraph, line breaks inside a paragraph as they are, table
 * cells of a row with tabs between them. Tracked changes are taken as accepted; comments, footnotes,
 * headers and footers are left out; nothing outside the file is followed.
 */
export async function textOfDocx(
  bytes: Uint8Array,
): Promise<{ readonly ok: true; readonly text: string } | ReadRefusal> {
  const files = listArchive(bytes);
  const broken: ReadRefusal = { ok: false, code: 'broken file', format: 'docx' };
  if (files === null || !files.some((file) => file.name === documentPart)) return broken;
  const megabytes = Math.ceil(files.reduce((total, file) => total + file.size, 0) / 1_000_000);
  if (megabytes > mostMegabytes) {
    return { ok: false, code: 'too large', megabytes, limit: mostMegabytes };
  }
  let document: Element | undefined;
  try {
    await mammoth.convertToHtml(
      { buffer: Buffer.from(withoutWrappers(bytes)) },
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
  } catch {
    return broken;
  }
  if (document === undefined) return broken;
  return { ok: true, text: blocksOf(document).join('\n') };
}

/**
 * These elements only wrap runs, but the library would leave out what is in them. Only the parts
 * that hold text are kept.
 */
function withoutWrappers(bytes: Uint8Array): Uint8Array {
  const parts = unzipSync(bytes, { filter: ({ name }) => !/\/(?:media|embeddings)\//.test(name) });
  const xml = strFromU8(parts[documentPart]!);
  const wrapper = /<\/?w:(?:fldSimple|dir|bdo|moveTo)(?:\s[^<>]*)?>/g;
  if (!wrapper.test(xml)) return bytes;
  return zipSync({ ...parts, [documentPart]: strToU8(xml.replace(wrapper, '')) }, { level: 0 });
}

/** What the library makes of an element of the document, as far as it is looked at here. */
interface Element {
  readonly type: string;
  readonly value?: string;
  readonly breakType?: string;
  readonly children?: readonly Element[];
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
