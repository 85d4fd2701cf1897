import { createHash, randomBytes } from 'node:crypto';

/** Mints ids for what an edit brings into a study; `apply` mints none. */
export type MintId = (what: string) => string;

/** For the window: 128 random bits. */
export const randomIds: MintId = () => randomBytes(16).toString('hex');

/**
 * For the command line: ids that follow from what went in, so that the same call on the same files
 * gives the same bytes. `basis` is everything that the call depends on; a counter keeps ids apart.
 */
export function derivedIds(basis: unknown): MintId {
  const root = hashOf(basis);
  let counter = 0;
  return (what) => hashOf([root, what, counter++]).slice(0, 32);
}

/** SHA-256, hex, of a value's JSON or of bytes. */
export function hashOf(value: unknown): string {
  const data = value instanceof Uint8Array ? value : JSON.stringify(value);
  return createHash('sha256').update(data).digest('hex');
}
