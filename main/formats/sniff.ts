import { openArchive, type Archive } from './archive.ts';
import { documentPart } from './docx.ts';
import { isPdf } from './pdf.ts';
import { isRtf } from './rtf.ts';

type InArchive = 'docx' | 'odt' | 'xlsx';

/** What a file is, going by its first bytes and, for an archive, by what is in it. */
export type Sniffed =
  | { readonly kind: 'pdf' | 'rtf' | 'locked' | 'writing' | 'torn archive' }
  | { readonly kind: InArchive; readonly archive: Archive }
  | { readonly kind: 'broken'; readonly format: InArchive }
  | { readonly kind: 'other'; readonly format: string };

const beginnings: readonly (readonly [format: string, at: number, bytes: string])[] = [
  ['image', 0, '\x89PNG'],
  ['image', 0, '\xff\xd8\xff'],
  ['image', 0, 'GIF8'],
  ['image', 0, 'II*\0'],
  ['image', 0, 'MM\0*'],
  ['image', 8, 'WEBP'],
  ['recording', 0, 'ID3'],
  ['recording', 0, '\xff\xfb'],
  ['recording', 0, '\xff\xf1'],
  ['recording', 0, 'OggS'],
  ['recording', 0, 'fLaC'],
  ['recording', 8, 'WAVE'],
  ['recording', 8, 'AVI '],
  ['recording', 4, 'ftyp'],
  ['recording', 0, '\x1a\x45\xdf\xa3'],
  ['archive', 0, 'Rar!'],
  ['archive', 0, '7z\xbc\xaf'],
  ['archive', 0, '\x1f\x8b'],
  ['program', 0, '\x7fELF'],
  ['program', 0, 'MZ\x90'],
];

const compound = '\xd0\xcf\x11\xe0\xa1\xb1\x1a\xe1';

export function sniff(bytes: Uint8Array): Sniffed {
  const first = latin1(bytes.subarray(0, 16));
  if (first.startsWith('PK\x03\x04') || first.startsWith('PK\x05\x06')) return sniffArchive(bytes);
  // The container of old Office files, and of new ones with a password.
  if (first.startsWith(compound)) {
    const names = latin1(bytes.subarray(0, 1 << 20)).replaceAll('\0', '');
    if (names.includes('EncryptedPackage')) return { kind: 'locked' };
    return { kind: 'other', format: names.includes('WordDocument') ? 'doc' : 'old office file' };
  }
  if (isRtf(bytes)) return { kind: 'rtf' };
  for (const [format, at, mark] of beginnings) {
    if (first.startsWith(mark, at)) return { kind: 'other', format };
  }
  return isPdf(bytes) ? { kind: 'pdf' } : { kind: 'writing' };
}

function sniffArchive(bytes: Uint8Array): Sniffed {
  const archive = openArchive(bytes);
  // A torn archive has lost its list at the end; the names also stand before each file.
  if (archive === null) {
    const torn = latin1(bytes.subarray(0, 1 << 20));
    if (torn.includes('opendocument.text')) return { kind: 'broken', format: 'odt' };
    if (torn.includes('xl/')) return { kind: 'broken', format: 'xlsx' };
    if (torn.includes('[Content_Types].xml') || torn.includes('word/')) {
      return { kind: 'broken', format: 'docx' };
    }
    return { kind: 'torn archive' };
  }
  const has = (name: string): boolean => archive.names.includes(name);
  if (has(documentPart)) return { kind: 'docx', archive };
  if (has('xl/workbook.xml')) return { kind: 'xlsx', archive };
  if (has('ppt/presentation.xml')) return { kind: 'other', format: 'pptx' };
  const type = archive.read('mimetype', 200);
  if (type instanceof Uint8Array) {
    const mime = latin1(type);
    if (mime.includes('opendocument.text')) return { kind: 'odt', archive };
    if (mime.includes('opendocument.spreadsheet')) return { kind: 'other', format: 'ods' };
    if (mime.includes('epub')) return { kind: 'other', format: 'epub' };
  }
  if (has('[Content_Types].xml')) return { kind: 'broken', format: 'docx' };
  return { kind: 'other', format: 'archive' };
}

function latin1(bytes: Uint8Array): string {
  return Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength).toString('latin1');
}
