import { Document, Packer, Paragraph, Table, TableCell, TableRow, TextRun } from 'docx';
import { strToU8, unzipSync, zipSync } from 'fflate';
import { describe, expect, test } from 'vitest';
import { openArchive } from '../../../main/formats/archive.ts';
import { readDocx } from '../../../main/formats/docx.ts';
import { readTranscript } from '../../../main/formats/index.ts';

async function made(children: (Paragraph | Table)[]): Promise<Uint8Array> {
  return new Uint8Array(await Packer.toBuffer(new Document({ sections: [{ children }] })));
}

/** A document with this body, whatever it is. */
async function withBody(body: string): Promise<Uint8Array> {
  const parts = unzipSync(await made([new Paragraph('x')]));
  const xml = `<?xml version="1.0" encoding="UTF-8"?><w:document xmlns:w="http://schemas.openxmlformats.org/wordprocessingml/2006/main"><w:body>${body}</w:body></w:document>`;
  return zipSync({ ...parts, 'word/document.xml': strToU8(xml) });
}

async function textOf(bytes: Uint8Array): Promise<string> {
  const result = await readDocx(openArchive(bytes)!);
  if (!result.ok) throw new Error(result.code);
  return result.text;
}

const run = (text: string): string => `<w:r><w:t xml:space="preserve">${text}</w:t></w:r>`;

describe('a Word document gives', () => {
  test('a line a paragraph, empty ones too, with line breaks and tabs as they are', async () => {
    const bytes = await made([
      new Paragraph('Interviewer: How was it?'),
      new Paragraph(''),
      new Paragraph({
        children: [
          new TextRun({ text: 'Ruth: ', bold: true }),
          new TextRun('“Long”'),
          new TextRun({ text: 'and cold.', break: 1 }),
          new TextRun('\tYes.'),
        ],
      }),
    ]);
    expect(await textOf(bytes)).toBe('Interviewer: How was it?\n\nRuth: “Long”\nand cold.\tYes.');
  });

  test('the same turns as the text in a plain file', async () => {
    const lines = [
      'Date: 3 May',
      'INT: How was it?',
      'P07: Long.',
      'She said: no.',
      'INT: So?',
      'P07: Mm.',
    ];
    const bytes = await made(lines.map((line) => new Paragraph(line)));
    const [word, plain] = await Promise.all([
      readTranscript(bytes, 'a.docx'),
      readTranscript(strToU8(lines.join('\n')), 'a.txt'),
    ]);
    expect(word.ok && word.value.turns).toEqual(plain.ok && plain.value.turns);
    expect(word.ok && word.value.turns).toHaveLength(4);
  });

  test('the cells of a row with tabs between them', async () => {
    const row = (...cells: string[]): TableRow =>
      new TableRow({
        children: cells.map((cell) => new TableCell({ children: [new Paragraph(cell)] })),
      });
    const table = new Table({
      rows: [row('INT', 'How?'), row('P07', 'Well.'), row('INT', 'And?'), row('P07', 'So.')],
    });
    const result = await readTranscript(await made([table]), 'a.docx');
    expect(result.ok && result.value.turns.map((turn) => turn.speaker)).toEqual([
      'INT',
      'P07',
      'INT',
      'P07',
    ]);
  });

  test('tracked changes as if they were accepted', async () => {
    const change = 'w:id="1" w:author="a" w:date="2026-01-01T00:00:00Z"';
    const bytes = await withBody(
      `<w:p>${run('Ruth: ')}<w:del ${change}><w:r><w:delText>old </w:delText></w:r></w:del><w:ins ${change}>${run('new ')}</w:ins>${run('words')}</w:p>` +
        `<w:p><w:moveFrom ${change}>${run('gone')}</w:moveFrom><w:moveTo ${change}>${run('come')}</w:moveTo></w:p>` +
        `<w:p><w:pPr><w:rPr><w:del ${change}/></w:rPr></w:pPr>${run('joined ')}</w:p><w:p>${run('up')}</w:p>`,
    );
    expect(await textOf(bytes)).toBe('Ruth: new words\ncome\njoined up');
  });

  test('what stands in fields and other wrappers', async () => {
    const bytes = await withBody(
      `<w:p><w:fldSimple w:instr=" PAGE ">${run('one ')}</w:fldSimple><w:smartTag w:uri="u" w:element="e">${run('two ')}</w:smartTag><w:bdo w:val="ltr">${run('three ')}</w:bdo><w:hyperlink w:anchor="a">${run('four')}</w:hyperlink></w:p>`,
    );
    expect(await textOf(bytes)).toBe('one two three four');
  });
});

describe('refused is', () => {
  test('a document cut short anywhere', async () => {
    const bytes = await made([new Paragraph('INT: How?'), new Paragraph('P07: Well.')]);
    for (const share of [0.1, 0.5, 0.9, 0.99]) {
      const result = await readTranscript(
        bytes.slice(0, Math.floor(bytes.length * share)),
        'a.docx',
      );
      expect(result).toEqual({ ok: false, code: 'broken file', format: 'docx' });
    }
  });

  test('a document whose text is not well formed', async () => {
    expect(await readTranscript(await withBody('<w:p>'), 'a.docx')).toEqual({
      ok: false,
      code: 'broken file',
      format: 'docx',
    });
  });

  test('a document without its text, or one that never was one', async () => {
    const parts = unzipSync(await made([new Paragraph('x')]));
    delete parts['word/document.xml'];
    const broken = { ok: false, code: 'broken file', format: 'docx' };
    expect(await readTranscript(zipSync(parts), 'a.docx')).toEqual(broken);
    const noise = Uint8Array.from({ length: 400 }, (_, i) => (i * 7919) % 256);
    expect(await readTranscript(noise, 'a.docx')).toEqual(broken);
  });

  test('an empty document', async () => {
    expect(await readTranscript(await made([new Paragraph('')]), 'a.docx')).toEqual({
      ok: false,
      code: 'empty file',
    });
  });

  test('a document that would unpack to more than can be worked with', async () => {
    const parts = unzipSync(await made([new Paragraph('x')]));
    const bytes = zipSync({ ...parts, 'word/comments.xml': new Uint8Array(51_000_000) });
    expect(await readTranscript(bytes, 'a.docx')).toMatchObject({
      ok: false,
      code: 'too large',
      limit: 50,
    });
  });

  test('a document with a password', async () => {
    // An OLE container that holds a stream named EncryptedPackage (MS-OFFCRYPTO).
    const bytes = new Uint8Array(2048);
    bytes.set([0xd0, 0xcf, 0x11, 0xe0, 0xa1, 0xb1, 0x1a, 0xe1]);
    [...'EncryptedPackage'].forEach((c, i) => (bytes[1024 + 2 * i] = c.charCodeAt(0)));
    expect(await readTranscript(bytes, 'a.docx')).toEqual({ ok: false, code: 'locked file' });
  });
});
