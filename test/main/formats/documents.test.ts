import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { strToU8, zipSync } from 'fflate';
import { describe, expect, test } from 'vitest';
import { readSource, readTranscript, type ReadFile } from '../../../main/formats/index.ts';

const folder = join(import.meta.dirname, 'files');
const bytesOf = (name: string): Uint8Array => new Uint8Array(readFileSync(join(folder, name)));

async function read(name: string): Promise<ReadFile> {
  const result = await readTranscript(bytesOf(name), name);
  if (!result.ok) throw new Error(`${name}: ${result.code}`);
  return result.value;
}

function turnsIn({ text, turns }: ReadFile): [string | null, number | null, string][] {
  return turns.map(({ speaker, startTime, start, end }) => [
    speaker,
    startTime,
    text.slice(start, end),
  ]);
}

describe('one interview saved by an office suite', () => {
  test.each(['skell.docx', 'skell.odt', 'skell.rtf'])(
    'gives the same turns and details from %s as from plain text',
    async (name) => {
      const [plain, other] = await Promise.all([read('skell.txt'), read(name)]);
      expect(turnsIn(other)).toEqual(turnsIn(plain));
      expect(other.details).toEqual(plain.details);
      expect(turnsIn(plain)).toHaveLength(6);
      expect(new Set(plain.turns.map(({ speaker }) => speaker)).size).toBe(3);
    },
  );

  test.each(['skell.docx', 'skell.odt', 'skell.rtf'])(
    'has its comment and its footnote beside it in %s',
    async (name) => {
      const { notes } = await read(name);
      expect(notes).toHaveLength(2);
      expect(notes).toContainEqual({
        kind: 'comment',
        by: 'Kim',
        text: 'Check the year against the log.',
      });
      expect(notes).toContainEqual({
        kind: 'footnote',
        by: null,
        text: 'The crossing of 12 January.',
      });
    },
  );

  test.each(['skell.pdf', 'skell.html'])(
    'gives the same words from %s, which prints the deleted ones too',
    async (name) => {
      const [plain, other] = await Promise.all([read('skell.txt'), read(name)]);
      const printed = turnsIn(other).map(([speaker, time, words]) => [
        speaker,
        time,
        words.replace('and nothing happened', ''),
      ]);
      expect(printed).toEqual(turnsIn(plain));
      expect(other.notes).toEqual([
        { kind: 'footnote', by: null, text: 'The crossing of 12 January.' },
      ]);
    },
  );

  test('gives the same words from narrow pages: lines joined, divided words whole again', async () => {
    const [plain, narrow] = await Promise.all([read('skell.txt'), read('narrow.pdf')]);
    const words = (file: ReadFile): string[] => file.text.replaceAll('-', '').trim().split(/\s+/u);
    expect(words(narrow)).toEqual(words(plain));
    expect(narrow.turns.map(({ speaker }) => speaker)).toEqual(
      plain.turns.map(({ speaker }) => speaker),
    );
    expect(narrow.text).toContain('well-known');
  });
});

describe('a document is refused where', () => {
  test('a .pdf has a password', async () => {
    expect(await readTranscript(bytesOf('locked.pdf'), 'a.pdf')).toEqual({
      ok: false,
      code: 'locked file',
    });
  });

  test('a .pdf holds a page without text', async () => {
    expect(await readTranscript(strToU8(blankPdf), 'a.pdf')).toEqual({
      ok: false,
      code: 'scanned',
      pages: 1,
    });
  });

  test('an .odt has a password', async () => {
    const manifest =
      '<manifest:manifest xmlns:manifest="m"><manifest:encryption-data/></manifest:manifest>';
    const bytes = zipSync({
      mimetype: [strToU8('application/vnd.oasis.opendocument.text'), { level: 0 }],
      'META-INF/manifest.xml': strToU8(manifest),
      'content.xml': strToU8('x'),
    });
    expect(await readTranscript(bytes, 'a.odt')).toEqual({ ok: false, code: 'locked file' });
  });

  test.each(['skell.docx', 'skell.odt', 'skell.rtf', 'skell.pdf', 'answers.xlsx'])(
    '%s is cut short',
    async (name) => {
      const bytes = bytesOf(name);
      for (const share of [0.02, 0.3, 0.7]) {
        const result = await readSource(bytes.slice(0, Math.floor(bytes.length * share)), name);
        expect(result).toMatchObject({ ok: false, code: 'broken file' });
      }
    },
  );

  test('an archive unpacks to more than can be read, whatever size it claims', async () => {
    const bomb = zipSync({
      mimetype: [strToU8('application/vnd.oasis.opendocument.text'), { level: 0 }],
      'content.xml': new Uint8Array(60_000_000),
    });
    const list = bomb.lastIndexOf(2, bomb.length - 30);
    // The unpacked size in the list at the end (APPNOTE 4.3.12): claims to be small.
    for (let at = list - 60; at < bomb.length - 24; at++) {
      const mark = bomb.subarray(at, at + 4).join();
      if (mark === '80,75,1,2') new DataView(bomb.buffer).setUint32(at + 24, 100, true);
    }
    expect(await readTranscript(bomb, 'a.odt')).toMatchObject({ ok: false, code: 'too large' });
  });
});

describe('nothing outside the file is followed', () => {
  const odt = (content: string): Uint8Array =>
    zipSync({
      mimetype: [strToU8('application/vnd.oasis.opendocument.text'), { level: 0 }],
      'content.xml': strToU8(content),
    });

  test('an entity that names another file is a fault, and no word of that file comes in', async () => {
    const bytes = odt(
      `<?xml version="1.0"?><!DOCTYPE a [<!ENTITY e SYSTEM "file://${join(folder, 'README.md')}">]>` +
        '<office:document-content xmlns:office="o" xmlns:text="t"><office:body><office:text>' +
        '<text:p>P1: Here &e; we are.</text:p></office:text></office:body></office:document-content>',
    );
    expect(await readTranscript(bytes, 'a.odt')).toMatchObject({ code: 'broken file' });
  });

  test('entities inside entities are a fault', async () => {
    const bytes = odt(
      '<?xml version="1.0"?><!DOCTYPE a [<!ENTITY a "ha"><!ENTITY b "&a;&a;&a;&a;">]>' +
        '<office:document-content xmlns:office="o" xmlns:text="t"><office:body><office:text>' +
        '<text:p>P1: &b;</text:p></office:text></office:body></office:document-content>',
    );
    expect(await readTranscript(bytes, 'a.odt')).toMatchObject({ code: 'broken file' });
  });

  test('elements inside each other without end are a fault, not a crash', async () => {
    const deep = (open: string, times: number): string => open.repeat(times);
    expect(await readTranscript(odt(`<a>${deep('<b>', 100_000)}`), 'a.odt')).toMatchObject({
      code: 'broken file',
    });
    const page = `<!doctype html><p>P1: Here.${deep('<div>', 100_000)}`;
    expect(await readTranscript(strToU8(page), 'a.html')).toMatchObject({ code: 'broken file' });
    const rich = `{\\rtf1 P1: Here.${deep('{', 100_000)}`;
    expect(await readTranscript(strToU8(rich), 'a.rtf')).toMatchObject({ code: 'broken file' });
  });

  test('programs, styles and hidden parts of a page are no words', async () => {
    const page =
      '<!doctype html><title>T</title><script>alert("no")</script><style>p{}</style>' +
      '<p>INT: How?</p><p hidden>secret</p><p>P1: Well.<br>Yes.</p>' +
      '<table><tr><td>INT:</td><td>And?</td></tr></table><p>P1: So &amp; so.</p>';
    const result = await readTranscript(strToU8(page), 'a.html');
    expect(result.ok && result.value.text).toBe(
      'INT: How?\nP1: Well.\nYes.\nINT:\tAnd?\nP1: So & so.',
    );
  });
});

describe('rich text', () => {
  const textOf = async (body: string): Promise<string | null> => {
    const result = await readTranscript(Buffer.from(`{\\rtf1\\ansi ${body}}`, 'latin1'), 'a.rtf');
    return result.ok ? result.value.text : null;
  };

  test('takes characters from code pages, from Unicode with what stands in for it, and by name', async () => {
    expect(
      await textOf(
        "{\\fonttbl{\\f0\\fcharset0 A;}{\\f1\\fcharset204 B;}{\\f2\\fcharset128 C;}}P1: caf\\'e9 " +
          "{\\f1\\'ec\\'ee\\'f0\\'e5} {\\f2\\'8a\\'43} \\uc1\\u8217?\\u-10179?\\u-8704? " +
          '{\\uc2\\u233ab} \\ldblquote a\\rdblquote\\emdash b',
      ),
    ).toBe('P1: café море 海 ’😀 é “a”—b');
  });

  test('leaves out what was deleted, hidden, embedded or only describes', async () => {
    expect(
      await textOf(
        '{\\info{\\author K}}{\\header top}{\\stylesheet{\\s0 Normal;}}P1: one ' +
          '{\\deleted gone }{\\v hidden }{\\*\\unknown words}{\\pict 0102}{\\object{\\*\\objdata 00}}' +
          '{\\field{\\*\\fldinst HYPERLINK "http://a"}{\\fldrslt two}}\\par P1: three',
      ),
    ).toBe('P1: one two\nP1: three');
  });

  test('divides cells by tabs and rows by lines', async () => {
    expect(
      await textOf(
        'INT: \\cell How?\\cell\\row P1: \\cell Well.\\cell\\row INT:\\cell And?\\cell\\row',
      ),
    ).toBe('INT: \tHow?\nP1: \tWell.\nINT:\tAnd?\n');
  });
});

// A page with nothing on it but a drawn rectangle (ISO 32000-1, 7.5): what a scanner without text
// recognition leaves, but for the picture.
const blankPdf = `%PDF-1.4
1 0 obj <</Type /Catalog /Pages 2 0 R>> endobj
2 0 obj <</Type /Pages /Kids [3 0 R] /Count 1>> endobj
3 0 obj <</Type /Page /Parent 2 0 R /MediaBox [0 0 200 200] /Contents 4 0 R>> endobj
4 0 obj <</Length 18>> stream
10 10 50 50 re f
endstream endobj
trailer <</Root 1 0 R>>
%%EOF
`;
