import { createCipheriv, createDecipheriv, randomBytes, scrypt } from 'node:crypto';
import * as v from 'valibot';
import type { Identifier } from '../../engine/study/index.ts';
import { identifierKinds } from '../../engine/spans/index.ts';

/*
 * The names behind the stand-ins, apart from the study. JSON: `format`, `version` 1, scrypt's salt
 * and work (n, r, p), and in base64 a 96-bit nonce and AES-256-GCM of the entries with its tag; the
 * format's name and version are associated data.
 */
const format = 'understory key of stand-ins';
const version = 1;
const work = { n: 131_072, r: 8, p: 1 } as const;
const associated = Buffer.from(`${format} ${version}`, 'utf8');
const tagBytes = 16;

export type KeyEntry = Pick<Identifier, 'kind' | 'forms' | 'decision' | 'replacement'>;

const outer = v.object({
  format: v.literal(format),
  version: v.literal(version),
  salt: v.pipe(v.string(), v.maxLength(64)),
  nonce: v.pipe(v.string(), v.maxLength(64)),
  sealed: v.string(),
});
const inner = v.array(
  v.object({
    kind: v.picklist(identifierKinds),
    forms: v.array(v.string()),
    decision: v.picklist(['stand-in', 'generalised', 'left', 'not identifying']),
    replacement: v.nullable(v.string()),
  }),
);

export async function sealKey(entries: readonly KeyEntry[], password: string): Promise<Uint8Array> {
  const salt = randomBytes(16);
  const nonce = randomBytes(12);
  const cipher = createCipheriv('aes-256-gcm', await derive(password, salt), nonce);
  cipher.setAAD(associated);
  const sealed = Buffer.concat([
    cipher.update(Buffer.from(JSON.stringify(entries), 'utf8')),
    cipher.final(),
    cipher.getAuthTag(),
  ]);
  const text = JSON.stringify(
    {
      format,
      version,
      derivation: { name: 'scrypt', ...work },
      salt: salt.toString('base64'),
      nonce: nonce.toString('base64'),
      sealed: sealed.toString('base64'),
    },
    null,
    1,
  );
  return Buffer.from(`${text}\n`, 'utf8');
}

export type OpenedKey =
  | { readonly ok: true; readonly entries: readonly KeyEntry[] }
  | { readonly ok: false; readonly code: 'no key file' | 'key stays closed' };

/** A wrong password and a damaged file look alike: neither gives the tag that was written. */
export async function openKey(bytes: Uint8Array, password: string): Promise<OpenedKey> {
  const read = v.safeParse(outer, parsed(bytes));
  if (!read.success) return { ok: false, code: 'no key file' };
  const sealed = Buffer.from(read.output.sealed, 'base64');
  const nonce = Buffer.from(read.output.nonce, 'base64');
  if (sealed.length < tagBytes || nonce.length !== 12) return { ok: false, code: 'no key file' };
  try {
    const key = await derive(password, Buffer.from(read.output.salt, 'base64'));
    const decipher = createDecipheriv('aes-256-gcm', key, nonce, { authTagLength: tagBytes });
    decipher.setAAD(associated);
    decipher.setAuthTag(sealed.subarray(sealed.length - tagBytes));
    const plain = Buffer.concat([
      decipher.update(sealed.subarray(0, sealed.length - tagBytes)),
      decipher.final(),
    ]);
    const entries = v.safeParse(inner, parsed(plain));
    return entries.success
      ? { ok: true, entries: entries.output }
      : { ok: false, code: 'no key file' };
  } catch {
    return { ok: false, code: 'key stays closed' };
  }
}

function parsed(bytes: Uint8Array): unknown {
  try {
    return JSON.parse(Buffer.from(bytes).toString('utf8')) as unknown;
  } catch {
    return null;
  }
}

function derive(password: string, salt: Uint8Array): Promise<Buffer> {
  const { n, r, p } = work;
  return new Promise((resolve, reject) => {
    scrypt(
      password.normalize('NFC'),
      salt,
      32,
      { N: n, r, p, maxmem: 256 * 1024 * 1024 },
      (error, key) => (error ? reject(error) : resolve(key)),
    );
  });
}
