import { deepest, mostTextBytes, tooLarge } from './limits.ts';
import type { ReadDocument, SideNote } from './read-file.ts';

/** Destinations whose words are not the document's (Rich Text Format Specification 1.9.1). */
const passedOver: ReadonlySet<string> = new Set(
  (
    'colortbl stylesheet listtable listoverridetable revtbl rsidtbl filetbl xmlnstbl generator info ' +
    'header headerl headerr headerf footer footerl footerr footerf ftnsep ftnsepc ftncn aftnsep ' +
    'aftnsepc aftncn pict nonshppict object objdata fldinst listtext pntext pntxta pntxtb pn ' +
    'bkmkstart bkmkend atrfstart atrfend atndate atnref atnicn atnid atntime atnparent ' +
    'themedata colorschememapping datastore latentstyles datafield formfield xe tc tcn rxe txe ' +
    'private1 template passwordhash userprops docvar wgrffmtfilter mmathPr mailmerge pgptbl ' +
    'protusertbl picprop sp fchars lchars listpicture listname listlevel background nextfile'
  ).split(' '),
);

/** The characters that control words stand for. */
const characters: Readonly<Record<string, string>> = {
  tab: '\t',
  line: '\n',
  softline: '\n',
  emdash: '—',
  endash: '–',
  emspace: '\u2003',
  enspace: '\u2002',
  qmspace: '\u2005',
  bullet: '•',
  lquote: '‘',
  rquote: '’',
  ldblquote: '“',
  rdblquote: '”',
  ltrmark: '\u200e',
  rtlmark: '\u200f',
  zwj: '\u200d',
  zwnj: '\u200c',
};

/** \fcharsetN: the code page of a font (section "Font Table"). */
const codePagesOfCharsets: Readonly<Record<number, number>> = {
  0: 1252,
  77: 10000,
  128: 932,
  129: 949,
  134: 936,
  136: 950,
  161: 1253,
  162: 1254,
  163: 1258,
  177: 1255,
  178: 1256,
  186: 1257,
  204: 1251,
  222: 874,
  238: 1250,
};

const encodings: Readonly<Record<number, string>> = {
  437: 'windows-1252',
  850: 'windows-1252',
  866: 'ibm866',
  874: 'windows-874',
  932: 'shift_jis',
  936: 'gbk',
  949: 'euc-kr',
  950: 'big5',
  10000: 'macintosh',
  65001: 'utf-8',
};

interface Note {
  readonly kind: SideNote['kind'];
  readonly by: string | null;
  text: string;
}

/** What a group inherits from the one around it. */
interface State {
  skipped: boolean;
  /** Hidden, or deleted in tracked changes: their acceptance is what is read. */
  hidden: boolean;
  deleted: boolean;
  codePage: number;
  /** How many characters follow \u for readers that do not know it. */
  fallback: number;
  /** In the font table: the font that is being described. */
  inFonts: boolean;
  /** The name of whoever made the next comment is being read. */
  naming: boolean;
  note: Note | null;
}

/**
 * The text of a Rich Text document: a line a paragraph, line breaks and tabs as they are, table cells
 * of a row with tabs between them. Tracked changes are taken as accepted; comments and footnotes
 * stand beside; headers, footers, pictures and embedded objects are left out.
 */
export function readRtf(bytes: Uint8Array): ReadDocument {
  if (bytes.length > 4 * mostTextBytes) return tooLarge(bytes.length, 200);
  return new Reader(bytes).read();
}

export function isRtf(bytes: Uint8Array): boolean {
  return Buffer.from(bytes.buffer, bytes.byteOffset, Math.min(8, bytes.length))
    .toString('latin1')
    .startsWith('{\\rtf');
}

class Reader {
  readonly #bytes: Uint8Array;
  #at = 0;
  #text: string[] = [];
  #length = 0;
  readonly #notes: SideNote[] = [];
  #author = '';
  /** Bytes of a code page, decoded together: a character may take two of them. */
  #pending: number[] = [];
  /** Characters still to pass over behind a \u. */
  #toPassOver = 0;
  #fontPages = new Map<number, number>();
  #font = 0;
  #defaultPage = 1252;
  #defaultFont = 0;
  /** A cell ended, and whether another or the row's end follows is not known yet. */
  #cellEnded = false;
  #state: State = {
    skipped: false,
    hidden: false,
    deleted: false,
    codePage: 1252,
    fallback: 1,
    inFonts: false,
    naming: false,
    note: null,
  };
  readonly #states: State[] = [];

  constructor(bytes: Uint8Array) {
    this.#bytes = bytes;
  }

  read(): ReadDocument {
    const bytes = this.#bytes;
    let depth = 0;
    let ended = false;
    while (this.#at < bytes.length && !ended) {
      const byte = bytes[this.#at]!;
      if (byte === 0x7b) {
        this.#flush();
        this.#toPassOver = 0;
        this.#at++;
        if (++depth > deepest) return { ok: false, code: 'broken file', format: 'rtf' };
        this.#states.push(this.#state);
        this.#state = { ...this.#state };
      } else if (byte === 0x7d) {
        this.#flush();
        this.#toPassOver = 0;
        this.#at++;
        depth--;
        this.#closeGroup();
        ended = depth <= 0;
      } else if (byte === 0x5c) {
        this.#control();
      } else {
        this.#at++;
        // Line ends in the file are for people who read its source.
        if (byte === 0x0d || byte === 0x0a || byte === 0) continue;
        this.#byte(byte);
      }
      if (this.#length > mostTextBytes) return tooLarge(null);
    }
    this.#flush();
    // Cut off: what is missing cannot be guessed.
    if (!ended) return { ok: false, code: 'broken file', format: 'rtf' };
    return { ok: true, text: this.#text.join(''), notes: this.#notes };
  }

  #control(): void {
    const bytes = this.#bytes;
    const next = bytes[this.#at + 1];
    if (next === undefined) {
      this.#at++;
      return;
    }
    if (!isLetter(next)) {
      this.#symbol(next);
      return;
    }
    let at = this.#at + 1;
    const nameStart = at;
    while (at < bytes.length && at - nameStart < 32 && isLetter(bytes[at]!)) at++;
    const name = latin1(bytes, nameStart, at);
    const numberStart = at;
    if (bytes[at] === 0x2d) at++;
    while (at < bytes.length && at - numberStart < 11 && isDigit(bytes[at]!)) at++;
    const number = at === numberStart ? null : Number(latin1(bytes, numberStart, at));
    if (bytes[at] === 0x20) at++;
    this.#at = at;
    this.#word(name, number === null || Number.isNaN(number) ? null : number);
  }

  #symbol(symbol: number): void {
    this.#at += 2;
    const bytes = this.#bytes;
    switch (String.fromCharCode(symbol)) {
      case "'": {
        const value = Number.parseInt(latin1(bytes, this.#at, this.#at + 2), 16);
        this.#at += 2;
        if (!Number.isNaN(value)) this.#byte(value);
        break;
      }
      case '\\':
      case '{':
      case '}':
        this.#byte(symbol);
        break;
      case '~':
        this.#add('\u00a0');
        break;
      case '_':
        this.#add('\u2011');
        break;
      case '\n':
      case '\r':
        this.#word('par', null);
        break;
      case '\t':
        this.#word('tab', null);
        break;
      case '*': {
        // A destination that not every reader knows: passed over unless it is one of ours.
        const name = /^\s*\\([a-z]+)/u.exec(latin1(bytes, this.#at, this.#at + 40))?.[1] ?? '';
        if (!known.has(name)) this.#state.skipped = true;
        break;
      }
    }
  }

  #word(name: string, number: number | null): void {
    const state = this.#state;
    if (name === 'bin') {
      this.#at += Math.max(0, number ?? 0);
      return;
    }
    if (name === 'u') {
      this.#flush();
      const unit = (number ?? 0) & 0xffff;
      this.#add(String.fromCharCode(unit));
      this.#toPassOver = state.fallback;
      return;
    }
    this.#flush();
    if (passedOver.has(name)) {
      state.skipped = true;
      return;
    }
    const character = characters[name];
    if (character !== undefined) {
      this.#add(character);
      return;
    }
    switch (name) {
      case 'par':
      case 'sect':
      case 'page':
      case 'column':
        this.#add('\n');
        break;
      case 'cell':
      case 'nestcell':
        if (!this.#isSilent()) this.#cellEnded = true;
        break;
      case 'row':
      case 'nestrow':
        this.#cellEnded = false;
        this.#add('\n');
        break;
      case 'fonttbl':
        state.inFonts = true;
        break;
      case 'ansicpg':
        this.#defaultPage = pageOf(number ?? 1252);
        state.codePage = this.#defaultPage;
        break;
      case 'mac':
        this.#defaultPage = 10000;
        state.codePage = 10000;
        break;
      case 'deff':
        this.#defaultFont = number ?? 0;
        break;
      case 'f':
        this.#font = number ?? 0;
        if (!state.inFonts) state.codePage = this.#pageOfFont(this.#font);
        break;
      case 'fcharset':
        if (state.inFonts && number !== null) {
          const page = codePagesOfCharsets[number];
          if (page !== undefined) this.#fontPages.set(this.#font, page);
        }
        break;
      case 'cpg':
        if (state.inFonts && number !== null) this.#fontPages.set(this.#font, pageOf(number));
        break;
      case 'plain':
        state.hidden = false;
        state.deleted = false;
        state.codePage = this.#pageOfFont(this.#defaultFont);
        break;
      case 'v':
        state.hidden = number !== 0;
        break;
      case 'deleted':
        state.deleted = number !== 0;
        break;
      case 'uc':
        state.fallback = Math.max(0, Math.min(number ?? 1, 16));
        break;
      case 'footnote':
        state.note = { kind: 'footnote', by: null, text: '' };
        break;
      case 'ftnalt':
        if (state.note?.kind === 'footnote') state.note = { ...state.note, kind: 'endnote' };
        break;
      case 'annotation':
        state.note = { kind: 'comment', by: this.#author.trim() || null, text: '' };
        this.#author = '';
        break;
      case 'atnauthor':
        state.naming = true;
        this.#author = '';
        break;
      case 'chftn':
      case 'chatn':
        break;
    }
  }

  #pageOfFont(font: number): number {
    const page = this.#fontPages.get(font);
    // Fonts say 1252 where they say nothing in particular.
    return page === undefined || page === 1252 ? this.#defaultPage : page;
  }

  #byte(byte: number): void {
    if (this.#toPassOver > 0) {
      this.#toPassOver--;
      return;
    }
    if (this.#isSilent()) return;
    this.#pending.push(byte);
    if (this.#pending.length >= 4096) this.#flush();
  }

  #flush(): void {
    if (this.#pending.length === 0) return;
    const bytes = Uint8Array.from(this.#pending);
    this.#pending = [];
    this.#add(decoderFor(this.#state.codePage).decode(bytes));
  }

  #isSilent(): boolean {
    const { skipped, hidden, deleted, inFonts } = this.#state;
    return skipped || hidden || deleted || inFonts;
  }

  #add(text: string): void {
    if (this.#isSilent()) return;
    const { naming, note } = this.#state;
    if (naming) {
      this.#author += text;
      return;
    }
    this.#length += text.length;
    if (note !== null) {
      note.text += text;
      return;
    }
    if (this.#cellEnded) {
      this.#cellEnded = false;
      this.#text.push('\t');
    }
    this.#text.push(text);
  }

  #closeGroup(): void {
    const { note } = this.#state;
    const outer = this.#states.pop();
    if (outer === undefined) return;
    // \ftnalt makes another object of it in the group that it stands in.
    if (note !== null && outer.note === null) {
      const text = note.text.trim();
      if (text !== '') this.#notes.push({ kind: note.kind, by: note.by, text });
    }
    this.#state = outer;
  }
}

const known: ReadonlySet<string> = new Set([
  'annotation',
  'atnauthor',
  'footnote',
  'fldrslt',
  'shppict',
  'ud',
  'upr',
]);

function isLetter(byte: number): boolean {
  return (byte >= 0x61 && byte <= 0x7a) || (byte >= 0x41 && byte <= 0x5a);
}

function isDigit(byte: number): boolean {
  return byte >= 0x30 && byte <= 0x39;
}

function latin1(bytes: Uint8Array, start: number, end: number): string {
  return Buffer.from(
    bytes.buffer,
    bytes.byteOffset + start,
    Math.max(0, Math.min(end, bytes.length) - start),
  ).toString('latin1');
}

function pageOf(number: number): number {
  return number === 1252 || number === 0 ? 1252 : number;
}

type Decoder = InstanceType<typeof TextDecoder>;

const decoders = new Map<number, Decoder>();

function decoderFor(page: number): Decoder {
  const known = decoders.get(page);
  if (known !== undefined) return known;
  let decoder: Decoder;
  try {
    decoder = new TextDecoder(encodings[page] ?? `windows-${page}`);
  } catch {
    decoder = new TextDecoder('windows-1252');
  }
  decoders.set(page, decoder);
  return decoder;
}
