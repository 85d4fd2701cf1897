import type { getDocument } from 'pdfjs-dist';
import type { TextItem } from 'pdfjs-dist/types/src/display/api.js';
import { mostTextBytes, tooLarge } from './limits.ts';
import { textOfPages, type PdfPage } from './pdf-lines.ts';
import type { ReadDocument, SideNote } from './read-file.ts';

const mostPages = 5_000;

type Library = { readonly getDocument: typeof getDocument };

/** Classes of a browser that the library names as it starts and uses only to draw. */
class Unused {}

/** The library, once; its other half runs on this thread, so that nothing is loaded by address. */
async function library(): Promise<Library> {
  const names = globalThis as Record<string, unknown>;
  for (const name of ['DOMMatrix', 'ImageData', 'Path2D']) names[name] ??= Unused;
  const [pdf, worker] = await Promise.all([
    import('pdfjs-dist/legacy/build/pdf.mjs'),
    // Without types of its own.
    import('pdfjs-dist/legacy/build/pdf.worker.mjs' as string),
  ]);
  (globalThis as { pdfjsWorker?: unknown }).pdfjsWorker = worker;
  return pdf;
}

export function isPdf(bytes: Uint8Array): boolean {
  const start = Buffer.from(bytes.buffer, bytes.byteOffset, Math.min(1024, bytes.length));
  return start.toString('latin1').includes('%PDF-');
}

/**
 * The text layer of a PDF as paragraphs, one a line (see `textOfPages`); its comments stand beside.
 * Scripts, forms, attachments and links are not looked at.
 */
export async function readPdf(bytes: Uint8Array): Promise<ReadDocument> {
  const pdf = await library();
  const loading = pdf.getDocument({
    // The library keeps what it is handed.
    data: bytes.slice(),
    verbosity: 0,
    isEvalSupported: false,
    disableFontFace: true,
    useSystemFonts: false,
    useWorkerFetch: false,
    disableAutoFetch: true,
    disableStream: true,
    enableXfa: false,
    stopAtErrors: false,
  });
  try {
    const document = await loading.promise;
    const pages: PdfPage[] = [];
    const notes: SideNote[] = [];
    let length = 0;
    if (document.numPages > mostPages) return { ok: false, code: 'broken file', format: 'pdf' };
    for (let number = 1; number <= document.numPages; number++) {
      const page = await document.getPage(number);
      const [left, bottom, right, top] = page.view as [number, number, number, number];
      const { items } = await page.getTextContent({ includeMarkedContent: false });
      const runs = (items as TextItem[]).map(({ str, transform, width, height }) => {
        const [, , c, d, x, y] = transform as [number, number, number, number, number, number];
        const size = height > 0 ? height : Math.sqrt(c * c + d * d);
        return { text: str, x: x - left, y: y - bottom, width, height: size };
      });
      for (const { text } of runs) length += text.length;
      if (length > mostTextBytes) return tooLarge(null);
      pages.push({ width: right - left, height: top - bottom, runs });
      notes.push(...(await commentsOn(page)));
      page.cleanup();
    }
    if (pages.every(({ runs }) => runs.every(({ text }) => text.trim() === ''))) {
      return { ok: false, code: 'scanned', pages: pages.length };
    }
    const { text, footnotes } = textOfPages(pages);
    const below = footnotes.map((note) => ({ kind: 'footnote' as const, by: null, text: note }));
    return { ok: true, text, notes: [...below, ...notes] };
  } catch (error) {
    const name = error instanceof Error ? error.name : '';
    if (name === 'PasswordException') return { ok: false, code: 'locked file' };
    return { ok: false, code: 'broken file', format: 'pdf' };
  } finally {
    await loading.destroy().catch(() => {});
  }
}

interface Annotation {
  readonly subtype?: string;
  readonly contentsObj?: { readonly str?: string };
  readonly titleObj?: { readonly str?: string };
}

const commenting: ReadonlySet<string> = new Set([
  'Text',
  'FreeText',
  'Highlight',
  'Underline',
  'StrikeOut',
  'Squiggly',
  'Caret',
]);

async function commentsOn(page: { getAnnotations: () => Promise<unknown[]> }): Promise<SideNote[]> {
  let annotations: Annotation[];
  try {
    annotations = (await page.getAnnotations()) as Annotation[];
  } catch {
    return [];
  }
  return annotations.flatMap(({ subtype, contentsObj, titleObj }) => {
    const text = (contentsObj?.str ?? '').trim();
    if (text === '' || !commenting.has(subtype ?? '')) return [];
    return [{ kind: 'comment' as const, by: titleObj?.str?.trim() || null, text }];
  });
}
