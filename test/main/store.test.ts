import { describe, expect, test } from 'vitest';
import { BufferedStore } from '../../main/store.ts';

const bytes = (...values: number[]): Uint8Array => Uint8Array.from(values);

describe('a store that keeps until it is flushed', () => {
  test('numbers records as a file does: blobs first, their edit after them', () => {
    const store = new BufferedStore(null);
    const told: unknown[] = [];
    const result = store.appendAll([
      { edit: (...args) => told.push(args) },
      { blobs: [bytes(1), bytes(2)], edit: (...args) => told.push(args) },
    ]);
    expect(result).toEqual({ ok: true, value: [1, 4] });
    expect(told).toEqual([
      [[], 1],
      [[2, 3], 4],
    ]);
    expect(store.nextSequence).toBe(5);
    expect(store.readBlob(3)).toEqual(bytes(2));
  });

  test('goes on from its base, reads from it and writes nothing to it', () => {
    const base = new BufferedStore(null);
    base.appendAll([{ blobs: [bytes(7)], edit: () => 'base' }]);
    const store = new BufferedStore(base);
    expect(store.appendAll([{ blobs: [bytes(8)], edit: () => 'own' }])).toEqual({
      ok: true,
      value: [4],
    });
    expect([store.readBlob(1), store.readBlob(3)]).toEqual([bytes(7), bytes(8)]);
    expect(base.nextSequence).toBe(3);
  });

  test('hands over once, with the same numbers', () => {
    const target = new BufferedStore(null);
    const store = new BufferedStore(null);
    store.appendAll([{ blobs: [bytes(5)], edit: ([blob]) => ({ blob }) }]);
    expect(store.flush(target)).toEqual({ ok: true, value: [2] });
    expect(target.readBlob(1)).toEqual(bytes(5));
    expect(store.flush(target)).toEqual({ ok: true, value: [] });
    expect(target.nextSequence).toBe(3);
  });

  test('keeps everything where handing over fails', () => {
    const store = new BufferedStore(null);
    store.appendAll([{ edit: () => 'kept' }]);
    const full = { ok: false, code: 'no space', path: 'a' } as const;
    const broken = { nextSequence: 1, readOnly: false, appendAll: () => full, readBlob: bytes };
    expect(store.flush(broken)).toBe(full);
    const target = new BufferedStore(null);
    expect(store.flush(target)).toEqual({ ok: true, value: [1] });
  });

  test('refuses a blob that is nowhere', () => {
    expect(() => new BufferedStore(null).readBlob(1)).toThrow('no blob 1');
  });
});
