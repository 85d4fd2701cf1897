import { turnsFromText } from '../../engine/text/index.ts';
import { layOutCues } from './cues.ts';
import { decode } from './decode.ts';
import { readDocx } from './docx.ts';
import { isHtml, readHtml } from './html.ts';
import { mostFileMegabytes, mostTextBytes, tooLarge } from './limits.ts';
import { readOdt } from './odt.ts';
import { readPdf } from './pdf.ts';
import type {
  DocumentFormat,
  Format,
  ReadDocument,
  ReadFile,
  ReadResult,
  ReadSource,
} from './read-file.ts';
import { readRtf } from './rtf.ts';
import { sniff } from './sniff.ts';
import { isSrt, parseSrt, withoutTags } from './srt.ts';
import { hasTableName, readCsv, readXlsx } from './table.ts';
import { otherTextFormat } from './text.ts';
import { isVtt, parseVtt } from './vtt.ts';

/**
 * A transcript, or a table of answers, from the bytes of its file. What is in the file decides what
 * it is; its name is asked only where a text could be anything.
 */
export async function readSource(bytes: Uint8Array, fileName: string): Promise<ReadSource> {
  const read = await readNote(bytes, fileName);
  if (read.ok && read.kind === 'transcript' && read.value.turns.length === 0) {
    return { ok: false, code: 'no speech', format: read.value.format };
  }
  return read;
}

/** The same for what is kept beside transcripts: it need not hold speech. */
export async function readNote(bytes: Uint8Array, fileName: string): Promise<ReadSource> {
  if (bytes.length === 0) return { ok: false, code: 'empty file' };
  if (bytes.length > mostFileMegabytes * 1_000_000) {
    return tooLarge(bytes.length, mostFileMegabytes);
  }
  const sniffed = sniff(bytes);
  switch (sniffed.kind) {
    case 'locked':
      return { ok: false, code: 'locked file' };
    case 'torn archive': {
      // Too little is left to say what it was: its name does.
      const format = formatClaimed(fileName);
      return format === null
        ? { ok: false, code: 'unknown format', format: 'archive' }
        : { ok: false, code: 'broken file', format };
    }
    case 'broken':
      return { ok: false, code: 'broken file', format: sniffed.format };
    case 'other':
      return { ok: false, code: 'unknown format', format: sniffed.format };
    case 'docx':
      return document('docx', await readDocx(sniffed.archive));
    case 'odt':
      return document('odt', readOdt(sniffed.archive));
    case 'rtf':
      return document('rtf', readRtf(bytes));
    case 'pdf':
      return document('pdf', await readPdf(bytes));
    case 'xlsx': {
      const table = await readXlsx(sniffed.archive);
      return table.ok ? { ...table, kind: 'table' } : table;
    }
    case 'writing':
      return readWriting(bytes, fileName);
  }
}

/** A transcript from the bytes of its file; a table of answers is refused as one. */
export async function readTranscript(bytes: Uint8Array, fileName: string): Promise<ReadResult> {
  const read = await readSource(bytes, fileName);
  if (!read.ok) return read;
  if (read.kind === 'table') return { ok: false, code: 'a table' };
  return { ok: true, value: read.value };
}

function readWriting(bytes: Uint8Array, fileName: string): ReadSource {
  if (bytes.length > mostTextBytes) return tooLarge(bytes.length);
  const decoded = decode(bytes);
  if (!decoded.ok) {
    const format = formatClaimed(fileName);
    return format !== null && decoded.code !== 'empty file'
      ? { ok: false, code: 'broken file', format }
      : decoded;
  }
  const { text } = decoded;
  if (isVtt(text)) {
    const { cues, details } = parseVtt(text);
    return spoken('vtt', layOutCues(cues, details));
  }
  if (isSrt(text)) return spoken('srt', layOutCues(withoutTags(parseSrt(text)), []));
  if (isHtml(text, fileName)) return document('html', readHtml(text));
  if (hasTableName(fileName)) {
    const table = readCsv(text);
    if (table !== null) return table.ok ? { ...table, kind: 'table' } : table;
    return spoken('text', { text, ...turnsFromText(text) });
  }
  const other = otherTextFormat(text, fileName);
  if (other !== null) return { ok: false, code: 'unknown format', format: other };
  return spoken('text', { text, ...turnsFromText(text) });
}

const claims = [
  [/\.docx$/iu, 'docx'],
  [/\.odt$/iu, 'odt'],
  [/\.xlsx$/iu, 'xlsx'],
  [/\.pdf$/iu, 'pdf'],
  [/\.rtf$/iu, 'rtf'],
] as const;

/** What the ending of a name says, for what is no writing. */
function formatClaimed(fileName: string): Format | null {
  return claims.find(([ending]) => ending.test(fileName))?.[1] ?? null;
}

function document(format: DocumentFormat, read: ReadDocument): ReadSource {
  if (!read.ok) return read;
  const text = read.text.replace(/\r\n?/gu, '\n');
  if (text.trim() === '') return { ok: false, code: 'empty file' };
  return spoken(format, { text, ...turnsFromText(text), notes: read.notes });
}

function spoken(
  format: DocumentFormat,
  file: Omit<ReadFile, 'format' | 'notes'> & { readonly notes?: ReadFile['notes'] },
): ReadSource {
  return { ok: true, kind: 'transcript', value: { notes: [], format, ...file } };
}
