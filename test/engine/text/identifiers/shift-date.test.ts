import { describe, expect, it } from 'vitest';
import { shiftDate } from '../../../../engine/text/index.ts';

describe('shiftDate', () => {
  it.each([
    ['1987-05-03', 30, '1987-06-02'],
    ['3/5/1987', 30, '2/6/1987'],
    ['12/31/1999', 1, '01/01/2000'],
    ['03.05.87', -3, '30.04.87'],
    ['3 May 1987', 30, '2 June 1987'],
    ['May 3rd', -1, 'May 2nd'],
    ['3. Mai 1987', -30, '3. April 1987'],
    ['1er mai 2020', 40, '10 juin 2020'],
    ['3 mai 2020', 40, '12 juin 2020'],
    ['8 de enero de 2011', -8, '31 de diciembre de 2010'],
    ['28 February 2000', 1, '29 February 2000'],
    ['28 February 1900', 1, '1 March 1900'],
    ['second of March', 1, null],
    ['May 1987', 1, null],
    ['31 February 2001', 1, null],
  ])('moves %s by %i days to %s', (from, days, to) => {
    expect(shiftDate(from, days)).toBe(to);
  });

  it('agrees with the calendar of the machine over four hundred years', () => {
    for (let day = -80_000; day < 80_000; day += 997) {
      const iso = (at: number): string => new Date(at * 86_400_000).toISOString().slice(0, 10);
      expect(shiftDate(iso(day), 123)).toBe(iso(day + 123));
    }
  });
});
