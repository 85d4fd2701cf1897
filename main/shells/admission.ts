import { createHash, randomBytes } from 'node:crypto';

/** How long an address can be used, in milliseconds. */
export const tokenLifetime = 5 * 60 * 1000;

/**
 * Who may speak to the loopback shell. An address carries a token that works once and not for long,
 * because the arguments of the program that opens a browser can be seen by others on the machine; it
 * is exchanged for a secret that never stands in an address. Only hashes are kept, so a comparison
 * tells nothing by its time.
 */
export class Admission {
  readonly #clock: () => number;
  readonly #secrets = new Set<string>();
  #token: { readonly hash: string; readonly until: number } | null = null;

  /** `clock`: milliseconds that only go up. */
  constructor(clock: () => number = () => performance.now()) {
    this.#clock = clock;
  }

  /** A new token; the one before it is void. */
  mintToken(): string {
    const token = random();
    this.#token = { hash: hashOf(token), until: this.#clock() + tokenLifetime };
    return token;
  }

  /** The secret for a token, or null where it is wrong, was used or is too old. */
  exchange(token: string): string | null {
    const held = this.#token;
    if (held === null || hashOf(token) !== held.hash) return null;
    this.#token = null;
    if (this.#clock() > held.until) return null;
    const secret = random();
    this.#secrets.add(hashOf(secret));
    return secret;
  }

  admits(secret: string): boolean {
    return this.#secrets.has(hashOf(secret));
  }
}

/** 256 bits, in letters that an address and a subprotocol may hold. */
function random(): string {
  return randomBytes(32).toString('base64url');
}

function hashOf(text: string): string {
  return createHash('sha256').update(text).digest('hex');
}
