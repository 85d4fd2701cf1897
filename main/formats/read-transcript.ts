import { turnsFromText } from '../../engine/text/index.ts';
import { layOutCues } from './cues.ts';
import { decode } from './decode.ts';
import { textOfDocx } from './docx.ts';
import type { Format, ReadFile, ReadResult } from './read-file.ts';
import { sniff } from './sniff.ts';
import { isSrt, parseSrt, withoutTags } from './srt.ts';
import { otherTextFormat } from './text.ts';
import { isVtt, parseVtt } from './vtt.ts';

/**
 * A transcript from the bytes of its file. What is in the file decides what it is; its name is asked
 * only where a text could be anything.
 */
export async function readTranscript(bytes: Uint8Array, fileName: string): Promise<ReadResult> {
  if (bytes.length === 0) return { ok: false, code: 'empty file' };
  const sniffed = sniff(bytes);
  if (sniffed.kind === 'locked') return { ok: false, code: 'locked file' };
  if (sniffed.kind === 'broken docx') return { ok: false, code: 'broken file', format: 'docx' };
  if (sniffed.kind === 'other') {
    return { ok: false, code: 'unknown format', format: sniffed.format };
  }
  if (sniffed.kind === 'docx') {
    const document = await textOfDocx(bytes);
    if (!document.ok) return document;
    if (document.text.trim() === '') return { ok: false, code: 'empty file' };
    return spoken('docx', { text: document.text, ...turnsFromText(document.text) });
  }

  const decoded = decode(bytes);
  if (!decoded.ok) {
    const claimed = /\.docx$/i.test(fileName) && decoded.code !== 'empty file';
    return claimed ? { ok: false, code: 'broken file', format: 'docx' } : decoded;
  }
  const { text } = decoded;
  if (isVtt(text)) {
    const { cues, details } = parseVtt(text);
    return spoken('vtt', layOutCues(cues, details));
  }
  if (isSrt(text)) return spoken('srt', layOutCues(withoutTags(parseSrt(text)), []));
  const other = otherTextFormat(text, fileName);
  if (other !== null) return { ok: false, code: 'unknown format', format: other };
  return spoken('text', { text, ...turnsFromText(text) });
}

function spoken(format: Format, file: Omit<ReadFile, 'format'>): ReadResult {
  if (file.turns.length === 0) return { ok: false, code: 'no speech', format };
  return { ok: true, value: { format, ...file } };
}
