import { describe, expect, test } from 'vitest';
import { pack, unpack } from '../../../engine/themes/packed.ts';
import { packResult, packWords, unpackFitted, unpackWords } from '../../../engine/themes/index.ts';
import { fit } from '../study/scene.ts';
import { wordsOf } from './scene.ts';

const words = wordsOf({ one: ['boat', 'naïve', 'boat'], two: [], three: ['naïve'] });

describe('packed numbers', () => {
  const arrays = {
    whole: Int32Array.of(-1, 0, 2_147_483_647),
    single: Float32Array.of(0.1, -0),
    double: Float64Array.of(0.1, 5e-324),
  };

  test('come back bit for bit, with their head', () => {
    const head = { what: 'test', names: ['é', null] };
    const back = unpack(pack({ head, arrays }));
    expect(back).toEqual({ head, arrays });
    expect(Object.is(back.arrays['single'][1], -0)).toBe(true);
  });

  test('come back from the middle of other bytes', () => {
    const bytes = pack({ head: null, arrays });
    const around = new Uint8Array(bytes.length + 20).fill(255);
    around.set(bytes, 3);
    expect(unpack(around.subarray(3, 3 + bytes.length)).arrays).toEqual(arrays);
  });

  test('stand as the layout says: length, directory, arrays at multiples of eight, little-endian', () => {
    const bytes = pack({ head: 0, arrays: { n: Int32Array.of(1, 258) } });
    const view = new DataView(bytes.buffer);
    const length = view.getUint32(0, true);
    expect(JSON.parse(new TextDecoder().decode(bytes.subarray(4, 4 + length)))).toEqual({
      head: 0,
      arrays: [{ name: 'n', kind: 'i32', length: 2 }],
    });
    const start = Math.ceil((4 + length) / 8) * 8;
    expect([...bytes.subarray(start, start + 8)]).toEqual([1, 0, 0, 0, 2, 1, 0, 0]);
    expect(bytes.length % 8).toBe(0);
  });

  test('must be finite', () => {
    for (const value of [Number.NaN, Infinity]) {
      expect(() => pack({ head: 0, arrays: { a: Float32Array.of(0, value) } })).toThrow(
        `pack: arrays.a[1] is ${value}, but must be finite`,
      );
    }
  });

  test('that were cut short are refused', () => {
    const bytes = pack({ head: 0, arrays });
    for (const length of [0, 3, 10, bytes.length - 8]) {
      expect(() => unpack(bytes.subarray(0, length))).toThrow(/cut short/u);
    }
  });
});

describe('stored words', () => {
  test('come back as they were, empty passages and missing places included', () => {
    const [first, ...others] = words.passages;
    const rich = {
      ...words,
      passages: [
        {
          ...first,
          speaker: null,
          questionBefore: { start: 2, end: 9 },
          startTime: 0,
          segments: [
            { start: 0, end: 4 },
            { start: 6, end: 30 },
          ],
        },
        ...others,
      ],
    };
    expect(unpackWords(packWords(rich))).toEqual(rich);
  });

  test('are the same bytes each time', () => {
    expect(packWords(unpackWords(packWords(words)))).toEqual(packWords(words));
  });
});

describe('a stored fit', () => {
  test('comes back as it was', () => {
    const found = {
      theta: Float32Array.of(0.25, 0.75, 0.5, 0.5, 1, 0),
      phi: Float32Array.of(0.5, 0.5, 0.125, 0.875),
      themeWords: Float64Array.of(1.5, 2.5),
      unexplained: Float32Array.of(1.25, 0, 0.5),
      trace: [],
      sweeps: 3,
      stopReason: 'converged',
      boundTerms: { words: -1, proportions: -2, distributions: -3 },
    } as const;
    const record = fit('stored', { themes: ['a', 'b'] });
    const { theta, phi, themeWords, unexplained } = found;
    expect(unpackFitted(record, words, packResult(found))).toEqual({
      fit: record,
      words,
      theta,
      phi,
      themeWords,
      unexplained,
    });
  });
});
