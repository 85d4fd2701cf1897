import { SaxesParser } from 'saxes';
import { decode } from './decode.ts';
import { deepest } from './limits.ts';

export interface XmlVisitor {
  /** `name` as it is written, with its prefix; attributes by the names they are written with. */
  readonly open: (name: string, attributes: Readonly<Record<string, string>>) => void;
  readonly close: (name: string) => void;
  readonly text: (text: string) => void;
}

/**
 * Walks through XML; false where it is not well-formed, too deep, or not text. Document types are
 * passed over: no entity is defined by them, none is fetched, and one that is used is a fault.
 */
export function walkXml(bytes: Uint8Array, visitor: XmlVisitor): boolean {
  const decoded = decode(bytes);
  if (!decoded.ok) return false;
  const parser = new SaxesParser({ position: false });
  let depth = 0;
  let whole = true;
  // The parser goes on after a fault; what follows is not trusted.
  parser.on('error', (error) => {
    whole = false;
    throw error;
  });
  parser.on('opentag', ({ name, attributes }) => {
    if (++depth > deepest) throw new Error('walkXml: too deep');
    visitor.open(name, attributes as Record<string, string>);
  });
  parser.on('closetag', ({ name }) => {
    depth--;
    visitor.close(name);
  });
  parser.on('text', (text) => visitor.text(text));
  parser.on('cdata', (text) => visitor.text(text));
  try {
    parser.write(decoded.text).close();
  } catch {
    return false;
  }
  return whole;
}

export function hasDoctype(bytes: Uint8Array): boolean {
  const start = Buffer.from(bytes.buffer, bytes.byteOffset, Math.min(bytes.byteLength, 4096));
  return start.toString('latin1').replaceAll('\0', '').includes('<!DOCTYPE');
}
