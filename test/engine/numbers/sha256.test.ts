import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { sha256 } from '../../../engine/numbers/index.ts';

const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

describe('sha256', () => {
  it('gives the published digests (NIST, examples for FIPS 180-4)', () => {
    expect(sha256(bytes('abc'))).toBe(
      'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad',
    );
    expect(sha256(bytes(''))).toBe(
      'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855',
    );
    expect(sha256(bytes('abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq'))).toBe(
      '248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1',
    );
    expect(sha256(new Uint8Array(1000000).fill(0x61))).toBe(
      'cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0',
    );
  });

  it('agrees with the machine at every length around the block borders', () => {
    for (let length = 0; length < 200; length++) {
      const input = Uint8Array.from({ length }, (_, i) => (i * 31 + length) & 255);
      expect(sha256(input)).toBe(createHash('sha256').update(input).digest('hex'));
    }
  });

  it('reads a view of a larger buffer from where the view starts', () => {
    const whole = bytes('xxabcxx');
    expect(sha256(whole.subarray(2, 5))).toBe(sha256(bytes('abc')));
  });
});
