/**
 * SHA-256 (NIST FIPS 180-4, 2015) of the bytes, as 64 lower-case hexadecimal digits. In plain
 * arithmetic, since the engine has no library of the machine to ask.
 */
export function sha256(bytes: Uint8Array): string {
  const state = Uint32Array.from(initial);
  const schedule = new Uint32Array(64);
  const whole = bytes.length - (bytes.length % 64);
  for (let start = 0; start < whole; start += 64) compress(state, schedule, bytes, start);

  // The rest, a 1 bit, zeros, and the length in bits: one block, or two where the length needs room.
  const rest = bytes.length - whole;
  const tail = new Uint8Array(rest < 56 ? 64 : 128);
  tail.set(bytes.subarray(whole));
  tail[rest] = 0x80;
  const view = new DataView(tail.buffer);
  view.setUint32(tail.length - 8, Math.floor(bytes.length / 536870912));
  view.setUint32(tail.length - 4, (bytes.length << 3) >>> 0);
  for (let start = 0; start < tail.length; start += 64) compress(state, schedule, tail, start);

  return Array.from(state, (word) => word.toString(16).padStart(8, '0')).join('');
}

function compress(
  state: Uint32Array,
  schedule: Uint32Array,
  bytes: Uint8Array,
  start: number,
): void {
  for (let t = 0; t < 16; t++) {
    const at = start + 4 * t;
    schedule[t] = (bytes[at] << 24) | (bytes[at + 1] << 16) | (bytes[at + 2] << 8) | bytes[at + 3];
  }
  for (let t = 16; t < 64; t++) {
    const x = schedule[t - 15];
    const y = schedule[t - 2];
    const sigma0 = rotateRight(x, 7) ^ rotateRight(x, 18) ^ (x >>> 3);
    const sigma1 = rotateRight(y, 17) ^ rotateRight(y, 19) ^ (y >>> 10);
    schedule[t] = schedule[t - 16] + sigma0 + schedule[t - 7] + sigma1;
  }
  let [a, b, c, d, e, f, g, h] = state as unknown as [
    number,
    number,
    number,
    number,
    number,
    number,
    number,
    number,
  ];
  for (let t = 0; t < 64; t++) {
    const sum1 = rotateRight(e, 6) ^ rotateRight(e, 11) ^ rotateRight(e, 25);
    const choice = (e & f) ^ (~e & g);
    const first = (h + sum1 + choice + constants[t] + schedule[t]) | 0;
    const sum0 = rotateRight(a, 2) ^ rotateRight(a, 13) ^ rotateRight(a, 22);
    const majority = (a & b) ^ (a & c) ^ (b & c);
    h = g;
    g = f;
    f = e;
    e = (d + first) | 0;
    d = c;
    c = b;
    b = a;
    a = (first + sum0 + majority) | 0;
  }
  state[0] += a;
  state[1] += b;
  state[2] += c;
  state[3] += d;
  state[4] += e;
  state[5] += f;
  state[6] += g;
  state[7] += h;
}

function rotateRight(x: number, n: number): number {
  return (x >>> n) | (x << (32 - n));
}

/** The first 32 bits of the fractions of the square roots of the first 8 primes. */
const initial = [
  0x6a09e667, 0xbb67ae85, 0x3c6ef372, 0xa54ff53a, 0x510e527f, 0x9b05688c, 0x1f83d9ab, 0x5be0cd19,
];

/** The first 32 bits of the fractions of the cube roots of the first 64 primes. */
const constants = [
  0x428a2f98, 0x71374491, 0xb5c0fbcf, 0xe9b5dba5, 0x3956c25b, 0x59f111f1, 0x923f82a4, 0xab1c5ed5,
  0xd807aa98, 0x12835b01, 0x243185be, 0x550c7dc3, 0x72be5d74, 0x80deb1fe, 0x9bdc06a7, 0xc19bf174,
  0xe49b69c1, 0xefbe4786, 0x0fc19dc6, 0x240ca1cc, 0x2de92c6f, 0x4a7484aa, 0x5cb0a9dc, 0x76f988da,
  0x983e5152, 0xa831c66d, 0xb00327c8, 0xbf597fc7, 0xc6e00bf3, 0xd5a79147, 0x06ca6351, 0x14292967,
  0x27b70a85, 0x2e1b2138, 0x4d2c6dfc, 0x53380d13, 0x650a7354, 0x766a0abb, 0x81c2c92e, 0x92722c85,
  0xa2bfe8a1, 0xa81a664b, 0xc24b8b70, 0xc76c51a3, 0xd192e819, 0xd6990624, 0xf40e3585, 0x106aa070,
  0x19a4c116, 0x1e376c08, 0x2748774c, 0x34b0bcb5, 0x391c0cb3, 0x4ed8aa4a, 0x5b9cca4f, 0x682e6ff3,
  0x748f82ee, 0x78a5636f, 0x84c87814, 0x8cc70208, 0x90befffa, 0xa4506ceb, 0xbef9a3f7, 0xc67178f2,
];
