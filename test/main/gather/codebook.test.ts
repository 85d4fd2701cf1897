import { strToU8 } from 'fflate';
import { describe, expect, test } from 'vitest';
import { emptyStudy } from '../../../engine/study/index.ts';
import { codebookEdits, readCodebook } from '../../../main/gather/codebook.ts';

function read(text: string): [string, string | null, string][] {
  const result = readCodebook(strToU8(text));
  if (!result.ok) throw new Error(result.code);
  return result.entries.map(({ name, heading, definition }) => [name, heading, definition.brief]);
}

// Elements and attributes as in the published schema of the exchange format for codebooks
// (urn:QDA-XML:codebook:1.0); the codes are invented.
const exchanged = `<?xml version="1.0" encoding="utf-8"?>
<CodeBook xmlns="urn:QDA-XML:codebook:1.0" origin="x"><Codes>
  <Code guid="1" name="Crossing" isCodable="true" color="#46AA00">
    <Description>Getting over the water</Description>
    <Code guid="2" name="Waiting" isCodable="true"/>
    <Code guid="3" name="Other" isCodable="true"/>
  </Code>
  <Code guid="4" name="Work" isCodable="false"><Code guid="5" name="Other" isCodable="true"/></Code>
  <Code guid="6" name="Silence" isCodable="true"/>
</Codes><Sets><Set guid="7" name="S"><MemberCode guid="2"/></Set></Sets></CodeBook>`;

describe('a codebook', () => {
  test('comes in from the open exchange format: codes, descriptions, what they stand under', () => {
    expect(read(exchanged)).toEqual([
      ['Crossing', 'Crossing', 'Getting over the water'],
      ['Waiting', 'Crossing', ''],
      ['Crossing: Other', 'Crossing', ''],
      ['Work: Other', 'Work', ''],
      ['Silence', null, ''],
    ]);
  });

  test('comes in from a table by the headings of its columns', () => {
    const table =
      'Name;Definition;When to use;Words;Parent\nCrossing;Over the water;any boat;ferry, boat;Sea\n;x;;;\n';
    const result = readCodebook(strToU8(table));
    expect(result.ok && result.entries).toEqual([
      {
        name: 'Crossing',
        heading: 'Sea',
        definition: {
          brief: 'Over the water',
          full: '',
          whenToUse: 'any boat',
          whenNotToUse: '',
          examples: '',
        },
        seeds: ['ferry', 'boat'],
      },
    ]);
  });

  test('may be a list of names', () => {
    expect(read('name\nCrossing\nWork\n').map(([name]) => name)).toEqual(['Crossing', 'Work']);
  });

  test.each([
    ['a table without names', 'a,b\n1,2\n'],
    ['other XML', '<?xml version="1.0"?><Project name="x"/>'],
    ['XML that is broken', exchanged.slice(0, 300)],
    [
      'an entity of its own',
      exchanged
        .replace('<CodeBook', '<!DOCTYPE a [<!ENTITY e "x">]><CodeBook')
        .replace('Getting', '&e;'),
    ],
    ['nothing', ''],
  ])('is not %s', (_, text) => {
    expect(readCodebook(strToU8(text))).toEqual({ ok: false, code: 'no codebook' });
  });

  test('becomes themes, by hand or with seeds, under headings, and passes over names that are taken', () => {
    const result = readCodebook(strToU8(exchanged));
    if (!result.ok) throw new Error(result.code);
    let count = 0;
    const edits = (byHand: boolean) =>
      codebookEdits(
        emptyStudy,
        result.entries,
        byHand,
        () => ['word'],
        (what) => `${what}${count++}`,
      );
    expect(edits(true).filter(({ kind }) => kind === 'headingAdded')).toHaveLength(2);
    expect(edits(true).filter(({ kind }) => kind === 'wordSeeded')).toEqual([]);
    expect(edits(false).filter(({ kind }) => kind === 'wordSeeded')).toHaveLength(5);
    const [first] = edits(true);
    const theme = first.kind === 'themeAdded' ? first.theme : null;
    const study = { ...emptyStudy, themes: new Map([['t', theme!]]) };
    expect(
      codebookEdits(
        study,
        result.entries,
        true,
        () => [],
        (what) => what,
      ).filter(({ kind }) => kind === 'themeAdded'),
    ).toHaveLength(4);
  });
});
