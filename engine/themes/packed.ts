/** Typed arrays that a packed blob can hold, by the name that its directory uses. */
const kinds = { i32: Int32Array, f32: Float32Array, f64: Float64Array } as const;
type Kind = keyof typeof kinds;
type Numbers = Int32Array | Float32Array | Float64Array;

export interface Packed {
  /** Plain JSON, stored as readable text. */
  readonly head: unknown;
  readonly arrays: Readonly<Record<string, Numbers>>;
}

interface Directory {
  readonly head: unknown;
  readonly arrays: readonly {
    readonly name: string;
    readonly kind: Kind;
    readonly length: number;
  }[];
}

const alignment = 8;

/**
 * Numbers with a readable head, for the study file. Layout, all little-endian: u32 length of the
 * directory in bytes; the directory, UTF-8 JSON `{head, arrays: [{name, kind, length}]}`; then each
 * array in that order, starting at the next multiple of 8 bytes. Kinds: i32, f32, f64. Numbers must
 * be finite.
 */
export function pack({ head, arrays }: Packed): Uint8Array<ArrayBuffer> {
  const names = Object.keys(arrays);
  const directory: Directory = {
    head,
    arrays: names.map((name) => ({
      name,
      kind: kindOf(arrays[name]),
      length: arrays[name].length,
    })),
  };
  const text = new TextEncoder().encode(JSON.stringify(directory));
  let size = aligned(4 + text.length);
  for (const name of names) size = aligned(size + arrays[name].byteLength);
  const bytes = new Uint8Array(size);
  const view = new DataView(bytes.buffer);
  view.setUint32(0, text.length, true);
  bytes.set(text, 4);
  let offset = aligned(4 + text.length);
  for (const name of names) {
    writeNumbers(view, offset, arrays[name], name);
    offset = aligned(offset + arrays[name].byteLength);
  }
  return bytes;
}

/** Reads what `pack` wrote; throws where the bytes are not that. Returns copies. */
export function unpack(bytes: Uint8Array): Packed {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const textLength = bytes.length < 4 ? -1 : view.getUint32(0, true);
  if (textLength < 0 || 4 + textLength > bytes.length) {
    throw new Error('unpack: bytes are cut short: they must hold a whole directory');
  }
  const directory = JSON.parse(
    new TextDecoder().decode(bytes.subarray(4, 4 + textLength)),
  ) as Directory;
  const arrays: Record<string, Numbers> = {};
  let offset = aligned(4 + textLength);
  for (const { name, kind, length } of directory.arrays) {
    const size = length * kinds[kind].BYTES_PER_ELEMENT;
    if (offset + size > bytes.length) {
      throw new Error(`unpack: bytes are cut short: they must hold ${length} numbers of ${name}`);
    }
    arrays[name] = readNumbers(view, offset, kind, length);
    offset = aligned(offset + size);
  }
  return { head: directory.head, arrays };
}

function aligned(offset: number): number {
  return Math.ceil(offset / alignment) * alignment;
}

function kindOf(numbers: Numbers): Kind {
  if (numbers instanceof Int32Array) return 'i32';
  return numbers instanceof Float32Array ? 'f32' : 'f64';
}

function writeNumbers(view: DataView, offset: number, numbers: Numbers, name: string): void {
  for (let i = 0; i < numbers.length; i++) {
    const value = numbers[i];
    if (!Number.isFinite(value)) {
      throw new Error(`pack: arrays.${name}[${i}] is ${value}, but must be finite`);
    }
    if (numbers instanceof Int32Array) view.setInt32(offset + 4 * i, value, true);
    else if (numbers instanceof Float32Array) view.setFloat32(offset + 4 * i, value, true);
    else view.setFloat64(offset + 8 * i, value, true);
  }
}

function readNumbers(view: DataView, offset: number, kind: Kind, length: number): Numbers {
  const numbers = new kinds[kind](length);
  for (let i = 0; i < length; i++) {
    if (kind === 'i32') numbers[i] = view.getInt32(offset + 4 * i, true);
    else if (kind === 'f32') numbers[i] = view.getFloat32(offset + 4 * i, true);
    else numbers[i] = view.getFloat64(offset + 8 * i, true);
  }
  return numbers;
}
