import {
  createCipheriv,
  createDecipheriv,
  createSecretKey,
  randomBytes,
  type KeyObject,
} from 'node:crypto';
import { commitmentOf, SALT_BYTES, sameBytes } from './chain.ts';
import { boundHead, type FrameHead } from './frame.ts';

/**
 * Payloads of a locked study: nonce, AES-256-GCM of (salt, body), tag (NIST SP 800-38D). The frame's
 * head up to and with its commitment is associated data, so that no payload can be moved to another
 * record. Nonces are 96 random bits each; a data key lives as long as its password.
 */
export const KEY_BYTES = 32;
export const NONCE_BYTES = 12;
export const TAG_BYTES = 16;
/** How much longer a payload is than its body. */
export const LOCKED_EXTRA_BYTES = NONCE_BYTES + SALT_BYTES + TAG_BYTES;

export class PayloadCipher {
  readonly #key: KeyObject;

  /** @param key 32 bytes; they are copied, and may be wiped afterwards */
  constructor(key: Uint8Array) {
    if (key.length !== KEY_BYTES) {
      throw new Error(`PayloadCipher: key has ${key.length} bytes, must have ${KEY_BYTES}`);
    }
    this.#key = createSecretKey(key);
  }

  /** The head and payload that a plain record has in a locked file; commitment and chain stay. */
  lock(head: FrameHead, body: Uint8Array): { readonly head: FrameHead; readonly payload: Buffer } {
    const locked: FrameHead = {
      ...head,
      encrypted: true,
      length: body.length + LOCKED_EXTRA_BYTES,
      salt: new Uint8Array(SALT_BYTES),
    };
    const nonce = randomBytes(NONCE_BYTES);
    const cipher = createCipheriv('aes-256-gcm', this.#key, nonce);
    cipher.setAAD(boundHead(locked));
    const pieces = [nonce, cipher.update(head.salt), cipher.update(body), cipher.final()];
    return { head: locked, payload: Buffer.concat([...pieces, cipher.getAuthTag()]) };
  }

  /** Salt and body of a whole payload, or null where it is not what was written. */
  unlock(head: FrameHead, payload: Uint8Array): { salt: Uint8Array; body: Uint8Array } | null {
    if (payload.length !== head.length) return null;
    const opened = this.opening(head, payload.subarray(0, NONCE_BYTES));
    if (opened === null) return null;
    const plain = opened.update(payload.subarray(NONCE_BYTES, payload.length - TAG_BYTES));
    if (!opened.holds(payload.subarray(payload.length - TAG_BYTES))) return null;
    const salt = Uint8Array.from(plain.subarray(0, SALT_BYTES));
    const body = plain.subarray(SALT_BYTES);
    return sameBytes(commitmentOf(salt, body), head.commitment) ? { salt, body } : null;
  }

  /**
   * What a payload says before anything is proved about it, for a record whose head is damaged: the
   * caller proves salt and body by the chain.
   */
  peek(payload: Uint8Array): { salt: Uint8Array; body: Uint8Array } | null {
    if (payload.length < LOCKED_EXTRA_BYTES) return null;
    const decipher = createDecipheriv('aes-256-gcm', this.#key, payload.subarray(0, NONCE_BYTES));
    const plain = decipher.update(payload.subarray(NONCE_BYTES, payload.length - TAG_BYTES));
    return { salt: plain.subarray(0, SALT_BYTES), body: plain.subarray(SALT_BYTES) };
  }

  /** Decrypts piece by piece; nothing may be believed before `holds`. Null for a payload too short. */
  opening(head: FrameHead, nonce: Uint8Array) {
    if (head.length < LOCKED_EXTRA_BYTES || nonce.length < NONCE_BYTES) return null;
    const decipher = createDecipheriv('aes-256-gcm', this.#key, nonce, {
      authTagLength: TAG_BYTES,
    });
    decipher.setAAD(boundHead(head));
    return {
      update: (piece: Uint8Array): Buffer => decipher.update(piece),
      holds(tag: Uint8Array): boolean {
        if (tag.length !== TAG_BYTES) return false;
        try {
          decipher.setAuthTag(tag);
          decipher.final();
          return true;
        } catch {
          return false;
        }
      },
    };
  }
}
