import { ExtensionCodec, decode, encode } from '@msgpack/msgpack';

/**
 * What a window and the server half say to each other over a WebSocket, one MessagePack value a
 * message (msgpack.org). Pure: the window takes it in as well. Electron carries the same parts by
 * structured clone and needs none of it.
 */

/** The WebSocket subprotocol of this wire; goes up when its messages change. */
export const wireProtocol = 'understory.1';

/** A subprotocol with this beginning carries the session's secret. */
export const secretPrefix = 'understory.secret.';

export type FromWindow =
  | { readonly say: 'call'; readonly id: number; readonly method: string; readonly takes: unknown }
  | { readonly say: 'cancel'; readonly id: number };

export type ToWindow =
  | { readonly say: 'answer'; readonly id: number; readonly answer: unknown }
  | { readonly say: 'progress'; readonly id: number; readonly progress: unknown }
  | { readonly say: 'event'; readonly event: string; readonly detail: unknown };

const float32Type = 1;
const int32Type = 2;

const extensionCodec = new ExtensionCodec();

// MessagePack knows bytes only. The two kinds of array that the api uses travel as their bytes in
// little-endian order, which is the order of every machine that the app runs on.
extensionCodec.register({
  type: float32Type,
  encode: (value) => (value instanceof Float32Array ? bytesOf(value) : null),
  decode: (bytes) => new Float32Array(ownBuffer(bytes, 4)),
});
extensionCodec.register({
  type: int32Type,
  encode: (value) => (value instanceof Int32Array ? bytesOf(value) : null),
  decode: (bytes) => new Int32Array(ownBuffer(bytes, 4)),
});

function bytesOf(array: Float32Array | Int32Array): Uint8Array {
  return new Uint8Array(array.buffer, array.byteOffset, array.byteLength);
}

/** A copy that starts at a multiple of the element size; throws where it holds no whole number. */
function ownBuffer(bytes: Uint8Array, size: number): ArrayBuffer {
  if (bytes.byteLength % size !== 0) {
    throw new Error(`wire: an array of ${bytes.byteLength} bytes must be a multiple of ${size}`);
  }
  return bytes.slice().buffer;
}

/** One message as bytes. Absent values (`undefined`) are left out. */
export function pack(message: FromWindow | ToWindow): Uint8Array<ArrayBuffer> {
  return encode(message, { extensionCodec, ignoreUndefined: true });
}

/** The value of a message, of unknown shape; throws where the bytes are no MessagePack value. */
export function unpack(bytes: ArrayLike<number> | ArrayBufferLike): unknown {
  return decode(bytes, { extensionCodec });
}
