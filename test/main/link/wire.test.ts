import { encode } from '@msgpack/msgpack';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { pack, unpack } from '../../../main/link/index.ts';

const carried = (detail: unknown): unknown =>
  (unpack(pack({ say: 'event', event: 'x', detail })) as { readonly detail: unknown }).detail;

describe('the wire', () => {
  it('carries plain data unchanged', () => {
    fc.assert(
      fc.property(fc.jsonValue({ maxDepth: 4 }), (value) => {
        // As text and back: minus zero and a key __proto__ are no plain data.
        const text = JSON.stringify(value);
        fc.pre(!text.includes('"__proto__":'));
        const plain: unknown = JSON.parse(text);
        expect(carried(plain)).toEqual(plain);
      }),
    );
  });

  it('carries bytes and both kinds of array, views with an odd offset as well', () => {
    const bytes = Uint8Array.from({ length: 40 }, (_, at) => at * 7);
    expect(carried(bytes.subarray(3, 20))).toEqual(bytes.slice(3, 20));
    const floats = Float32Array.of(0, -0, 1.5, Number.NaN, Infinity, 1e-40);
    expect(carried(floats.subarray(1))).toEqual(floats.slice(1));
    const whole = Int32Array.of(-1, 0, 2 ** 31 - 1, -(2 ** 31));
    const result = carried({ a: [whole], b: new Float32Array(0) });
    expect(result).toEqual({ a: [whole], b: new Float32Array(0) });
  });

  it('gives each array memory of its own', () => {
    const packed = pack({ say: 'event', event: 'x', detail: Float32Array.of(1, 2) });
    const message = unpack(packed) as { readonly detail: Float32Array };
    packed.fill(0);
    expect([...message.detail]).toEqual([1, 2]);
    expect(message.detail.buffer.byteLength).toBe(8);
  });

  it('leaves out what is undefined, as structured clone does not', () => {
    expect(carried({ a: undefined, b: 1 })).toEqual({ b: 1 });
  });

  it('refuses an array that is cut in the middle of a number, a cut message and a prototype', () => {
    const cut = Uint8Array.of(0xc7, 3, 1, 0, 0, 0);
    expect(() => unpack(cut)).toThrow('3 bytes must be a multiple of 4');
    const message = pack({ say: 'cancel', id: 1 });
    expect(() => unpack(message.subarray(0, message.length - 1))).toThrow();
    const proto = encode(JSON.parse('{"__proto__":{"polluted":true}}'));
    expect(() => unpack(proto)).toThrow();
    expect(({} as { polluted?: boolean }).polluted).toBeUndefined();
  });
});
