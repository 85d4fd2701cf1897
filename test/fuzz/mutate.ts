/** Small whole numbers below `below`, the same for the same seed (Marsaglia 2003, xorshift). */
export function chance(seed: number): (below: number) => number {
  let state = (seed * 2654435761 + 1) >>> 0 || 1;
  return (below) => {
    state ^= state << 13;
    state ^= state >>> 17;
    state ^= state << 5;
    state >>>= 0;
    return state % below;
  };
}

const pieces = [
  '\0',
  '\uffff',
  '<',
  '>',
  '</',
  '&#x',
  '&',
  '{',
  '}',
  '\\',
  "\\'",
  '\\u-1?',
  '\\bin9999999 ',
  '"',
  ',',
  ';',
  '\t',
  '\n',
  '\r',
  '-->',
  '99:99:99,999 --> 00:00:00,000\n',
  'INT:',
  ':',
  '%PDF-',
  'PK\x03\x04',
  '{\\rtf1',
  'WEBVTT\n\n',
  '<!DOCTYPE a [<!ENTITY e SYSTEM "file:///etc/passwd">]>',
  '<![CDATA[',
  ']]>',
  'endobj',
  'xref',
  'stream\n',
  '[0 0 R]',
  '{'.repeat(50),
  '<b>'.repeat(50),
].map((text) => Buffer.from(text, 'utf8'));

/** A file with a few things wrong: bytes changed, parts cut, doubled, moved, or put in. */
export function mutate(bytes: Uint8Array, draw: (below: number) => number): Uint8Array {
  let file = Buffer.from(bytes);
  const times = 1 + draw(6);
  for (let round = 0; round < times; round++) {
    const length = Math.max(1, file.length);
    const at = draw(length);
    const span = 1 + draw(Math.max(1, Math.min(400, length - at)));
    switch (draw(7)) {
      case 0:
        if (file.length > 0) file[at] = draw(256);
        break;
      case 1:
        file = Buffer.concat([file.subarray(0, at), file.subarray(at + span)]);
        break;
      case 2:
        file = Buffer.concat([file.subarray(0, at + span), file.subarray(at)]);
        break;
      case 3:
        file = Buffer.concat([
          file.subarray(0, at),
          pieces[draw(pieces.length)]!,
          file.subarray(at),
        ]);
        break;
      case 4:
        file = file.subarray(0, at);
        break;
      case 5:
        for (let i = at; i < Math.min(file.length, at + span); i++) file[i] = draw(256);
        break;
      case 6: {
        // Numbers in headers: lengths, offsets, counts.
        const value = [0, 0xff, 0xffff, 0x7fffffff, 0xffffffff][draw(5)]!;
        if (at + 4 <= file.length) file.writeUInt32LE(value, at);
        break;
      }
    }
  }
  return new Uint8Array(file);
}
