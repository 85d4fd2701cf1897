import { createCipheriv, createDecipheriv, randomBytes, scrypt } from 'node:crypto';
import { KEY_BYTES, NONCE_BYTES, PayloadCipher, TAG_BYTES } from './cipher.ts';

/**
 * From a password to the key of a study: scrypt (Percival 2009; RFC 7914) gives a key that wraps a
 * random data key. What the header keeps of it is JSON, twice, so that one damaged sector does not
 * take the whole study along.
 */
export interface DerivationWork {
  /** scrypt's cost, a power of two; memory is 128 · n · r bytes. */
  readonly n: number;
  readonly r: number;
  readonly p: number;
}

/** 128 MiB and about half a second. OWASP's password storage cheat sheet names the same least work. */
export const usualWork: DerivationWork = { n: 131_072, r: 8, p: 1 };

/** How each copy begins, so that it is found in a damaged header. */
export const KEY_BEGINNING = '{"derivation":';
/** Each half of the key region; JSON and spaces. */
export const KEY_HALF_BYTES = 2048;
export const SHORTEST_PASSWORD = 8;
/** Longer ones are refused, so that nobody pastes a document. */
export const LONGEST_PASSWORD = 1024;

// Four times the usual memory and eight times the usual work: room for later machines, and no more
// than a person would wait for. A header is only a file's word.
const MOST_MEMORY = 512 * 1024 * 1024;
const MOST_WORK = 8 * usualWork.n * usualWork.r;
const KDF_SALT_BYTES = 16;
const label = Buffer.from('understory data key', 'utf8');

interface KeyText extends DerivationWork {
  readonly salt: Uint8Array;
  readonly wrapped: Uint8Array;
}

export interface NewKey {
  readonly cipher: PayloadCipher;
  readonly keyRegion: Uint8Array;
}

export type UnlockFault = 'wrong password' | 'asks too much' | 'newer version' | 'damaged';

type KeyTextFault = Exclude<UnlockFault, 'wrong password'>;

export type Unlocked =
  | { readonly ok: true; readonly cipher: PayloadCipher }
  | { readonly ok: false; readonly why: UnlockFault };

/** Why a password cannot be set, or null. Counted in characters as a person sees them typed. */
export function passwordFault(password: string): 'too short' | 'too long' | null {
  const { length } = [...password];
  if (length < SHORTEST_PASSWORD) return 'too short';
  return length > LONGEST_PASSWORD ? 'too long' : null;
}

/** A new data key behind a password. Throws where the system has not the memory. */
export async function newKey(password: string, work = usualWork): Promise<NewKey> {
  const dataKey = randomBytes(KEY_BYTES);
  const salt = randomBytes(KDF_SALT_BYTES);
  const nonce = randomBytes(NONCE_BYTES);
  const outer = await derive(password, salt, work);
  const cipher = createCipheriv('aes-256-gcm', outer, nonce);
  cipher.setAAD(label);
  const wrapped = Buffer.concat([
    nonce,
    cipher.update(dataKey),
    cipher.final(),
    cipher.getAuthTag(),
  ]);
  const { n, r, p } = work;
  const text = JSON.stringify({
    derivation: 'scrypt',
    n,
    r,
    p,
    salt: salt.toString('base64'),
    key: wrapped.toString('base64'),
  });
  const half = Buffer.alloc(KEY_HALF_BYTES, ' ');
  half.write(text, 'utf8');
  const payloads = new PayloadCipher(dataKey);
  outer.fill(0);
  dataKey.fill(0);
  return { cipher: payloads, keyRegion: Buffer.concat([half, half]) };
}

/** The data key behind a password; what the file asks for is looked at before anything is derived. */
export async function unlockKey(keyRegion: Uint8Array, password: string): Promise<Unlocked> {
  const half = Math.floor(keyRegion.length / 2);
  // The whole of it is a single copy where recovery found one.
  const places = [keyRegion.subarray(0, half), keyRegion.subarray(half), keyRegion];
  const copies = places.map(readKeyText);
  const text = copies.find((copy) => typeof copy === 'object') ?? worst(copies);
  if (typeof text === 'string') return { ok: false, why: text };
  let outer: Buffer;
  try {
    outer = await derive(password, text.salt, text);
  } catch {
    // This machine has not even what a usual study asks for.
    return { ok: false, why: 'asks too much' };
  }
  const nonce = text.wrapped.subarray(0, NONCE_BYTES);
  const decipher = createDecipheriv('aes-256-gcm', outer, nonce, { authTagLength: TAG_BYTES });
  decipher.setAAD(label);
  decipher.setAuthTag(text.wrapped.subarray(-TAG_BYTES));
  const dataKey = decipher.update(text.wrapped.subarray(NONCE_BYTES, -TAG_BYTES));
  try {
    decipher.final();
    return { ok: true, cipher: new PayloadCipher(dataKey) };
  } catch {
    return { ok: false, why: 'wrong password' };
  } finally {
    outer.fill(0);
    dataKey.fill(0);
  }
}

function worst(copies: readonly (KeyText | KeyTextFault)[]): KeyTextFault {
  const faults = copies.filter((copy) => typeof copy === 'string');
  return faults.find((fault) => fault !== 'damaged') ?? 'damaged';
}

function readKeyText(half: Uint8Array): KeyText | KeyTextFault {
  let json: Record<string, unknown>;
  try {
    const parsed: unknown = JSON.parse(new TextDecoder('utf-8', { fatal: true }).decode(half));
    if (typeof parsed !== 'object' || parsed === null) return 'damaged';
    json = parsed as Record<string, unknown>;
  } catch {
    return 'damaged';
  }
  const { derivation, n, r, p, salt, key } = json;
  if (typeof derivation !== 'string') return 'damaged';
  if (derivation !== 'scrypt') return 'newer version';
  if (!isCount(n) || !isCount(r) || !isCount(p)) return 'damaged';
  if (128 * n * r > MOST_MEMORY || n * r * p > MOST_WORK) return 'asks too much';
  if (n < 2 || (n & (n - 1)) !== 0) return 'damaged';
  if (typeof salt !== 'string' || typeof key !== 'string') return 'damaged';
  const wrapped = Buffer.from(key, 'base64');
  if (wrapped.length !== NONCE_BYTES + KEY_BYTES + TAG_BYTES) return 'damaged';
  return { n, r, p, salt: Buffer.from(salt, 'base64'), wrapped };
}

function isCount(value: unknown): value is number {
  return Number.isSafeInteger(value) && (value as number) >= 1;
}

/** The same password typed on two systems may come composed or not: it is made one (NFC) first. */
function derive(password: string, salt: Uint8Array, work: DerivationWork): Promise<Buffer> {
  const { n, r, p } = work;
  const maxmem = 128 * r * (n + p + 2) + 1024;
  return new Promise((resolve, reject) => {
    const typed = Buffer.from(password.normalize('NFC'), 'utf8');
    scrypt(typed, salt, KEY_BYTES, { N: n, r, p, maxmem }, (error, key) => {
      typed.fill(0);
      if (error) reject(error);
      else resolve(key);
    });
  });
}
