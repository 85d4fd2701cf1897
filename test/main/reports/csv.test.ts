import { parse } from 'csv-parse/sync';
import { describe, expect, test } from 'vitest';
import { csv } from '../../../main/reports/csv.ts';
import { clock, decimals, yesNo } from '../../../main/reports/format.ts';
import { printedProportions, toSixDecimals } from '../../../main/reports/proportions.ts';
import { fittedOf, previousOf, wordsOf } from '../../engine/themes/scene.ts';
import values from '../../outside/values/csv.json' with { type: 'json' };

const open = { guard: false };

describe('tables', () => {
  test('come back as they were, whatever is in their cells', () => {
    for (const { rows } of values.csv) expect(parse(csv(rows, open))).toEqual(rows);
    const odd = [['a\rb', 'c\nd', 'e\r\nf', '"', ' g ', ',', '', 'ä', '\t', '"x"', ';']];
    expect(parse(csv(odd, open))).toEqual(odd);
  });

  test('end each line with CRLF and quote where RFC 4180 needs it', () => {
    expect(csv([['a', 1, null, 'b,c', 'd"e', 'f\rg', 'h\ni']], open)).toBe(
      'a,1,,"b,c","d""e","f\rg","h\ni"\r\n',
    );
  });

  test('cells that a spreadsheet would run get an apostrophe, others none (OWASP)', () => {
    const { prefix_with_quote: guarded, leave } = values.csv_injection;
    const one = (cell: string, guard: boolean): string => parse(csv([[cell]], { guard }))[0][0];
    for (const cell of guarded) {
      expect(one(cell, true)).toBe(`'${cell}`);
      expect(one(cell, false)).toBe(cell);
    }
    for (const cell of leave) expect(one(cell, true)).toBe(cell);
    for (const sign of '＋－＝＠') expect(one(`${sign}1`, true)).toBe(`'${sign}1`);
  });
});

describe('numbers', () => {
  test('have six decimals; none is an empty cell', () => {
    expect([decimals(0.5), decimals(1 / 3), decimals(null)]).toEqual(['0.500000', '0.333333', '']);
  });

  test('times are HH:MM:SS.mmm, hours as many as there are', () => {
    expect([0, 61_001, 3_599_999, 360_000_000, null].map(clock)).toEqual([
      '00:00:00.000',
      '00:01:01.001',
      '00:59:59.999',
      '100:00:00.000',
      '',
    ]);
  });

  test('yes, no, or nothing', () => {
    expect([true, false, null].map(yesNo)).toEqual(['yes', 'no', '']);
  });

  test('proportions sum to one in six decimals, each within a millionth of what it is', () => {
    const rows = [
      [1 / 3, 1 / 3, 1 / 3],
      [1, 0, 0],
      [0.9999996, 0.0000004, 0],
      [0.1 + 1e-7, 0.2, 0.7 + 1e-7],
      [2 / 3, 1 / 6, 1 / 6 + 3e-8],
    ];
    const words = wordsOf(Object.fromEntries(rows.map((_, i) => [`t${i}`, ['net']])));
    const fitted = fittedOf(previousOf(['a', 'b', 'c'], words, rows, [[1], [1], [1]]));
    rows.forEach((row, passage) => {
      const printed = printedProportions(fitted, passage);
      expect(printed.reduce((sum, value) => sum + Math.round(value * 1e6), 0)).toBe(1e6);
      printed.forEach((value, k) => expect(Math.abs(value - row[k])).toBeLessThan(1.1e-6));
    });
    expect(printedProportions(fitted, 0)).toEqual([0.333334, 0.333333, 0.333333]);
  });

  test('what is ordered by is what is seen', () => {
    expect(toSixDecimals(0.12345649)).toBe(0.123456);
    expect(toSixDecimals(0.9999999)).toBe(1);
  });
});
