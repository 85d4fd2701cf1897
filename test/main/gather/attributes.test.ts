import { describe, expect, test } from 'vitest';
import { attributeEdits, readAttributeTable } from '../../../main/gather/attributes.ts';
import { emptyStudy, type Study } from '../../../engine/study/index.ts';

const study: Study = {
  ...emptyStudy,
  participants: new Map(
    ['P01', 'Zoë'].map((name) => [name, { id: name, name, attributes: { kept: 'yes' } }]),
  ),
};

function described(text: string) {
  const table = readAttributeTable(text);
  if (table === null) throw new Error('no table');
  const { edits, unmatched } = attributeEdits(study, table);
  return {
    unmatched,
    attributes: Object.fromEntries(
      edits.flatMap((edit) =>
        edit.kind === 'participantDescribed' ? [[edit.participant, edit.to.attributes]] : [],
      ),
    ),
  };
}

describe('a table of attributes', () => {
  const expected = {
    unmatched: ['P99'],
    attributes: {
      P01: { kept: 'yes', site: 'north, by the sea', age: '40' },
      Zoë: { kept: 'yes', site: 'south' },
    },
  };

  test.each([
    ['commas', ',', '"north, by the sea"'],
    ['semicolons', ';', 'north, by the sea'],
    ['tabs', '\t', 'north, by the sea'],
  ])('is read with %s between its cells', (_, sign, north) => {
    const rows = [
      ['Participant', 'site', 'age'],
      ['p01 ', north, '40'],
      ['Zoe\u0308', 'south', ''],
      ['P99', 'x', '1'],
    ];
    expect(described(rows.map((row) => row.join(sign)).join('\r\n'))).toEqual(expected);
    expect(described(`\ufeff${rows.map((row) => row.join(sign)).join('\n')}\n\n`)).toEqual(
      expected,
    );
  });

  test('rows may be shorter or longer than the headings', () => {
    expect(described('participant,site\nP01\nZoë,south,more\n').attributes).toEqual({
      P01: { kept: 'yes' },
      Zoë: { kept: 'yes', site: 'south' },
    });
  });

  test('a person named twice is described once and named as left over', () => {
    expect(described('participant,site\nP01,north\np01,south\n')).toEqual({
      unmatched: ['p01'],
      attributes: { P01: { kept: 'yes', site: 'north' } },
    });
  });

  test('a column that names the transcript, or nothing, is no attribute', () => {
    expect(described('participant,transcript,,site\nP01,one,x,north\n').attributes['P01']).toEqual({
      kept: 'yes',
      site: 'north',
    });
  });

  test.each(['', 'participant', 'name,site\nP01,north', 'Interview with P01\n\nINT: Hello', '"'])(
    'is not %j',
    (text) => {
      expect(readAttributeTable(text)).toBeNull();
    },
  );
});
