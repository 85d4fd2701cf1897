import type { Detail, Turn } from '../../engine/spans/index.ts';

/** The formats that can be read as transcripts. */
export type DocumentFormat = 'text' | 'vtt' | 'srt' | 'docx' | 'odt' | 'rtf' | 'pdf' | 'html';

/** The formats that hold tables of answers. */
export type TableFormat = 'csv' | 'xlsx';

export type Format = DocumentFormat | TableFormat;

/** What stands beside the text of a document: kept with it and never mixed in. */
export interface SideNote {
  readonly kind: 'comment' | 'footnote' | 'endnote';
  /** Who wrote it, where the document says so. */
  readonly by: string | null;
  readonly text: string;
}

/** A transcript as it was in its file. */
export interface ReadFile {
  readonly format: DocumentFormat;
  /** The canonical text: decoded, no byte order mark, LF line ends, otherwise untouched. */
  readonly text: string;
  readonly details: readonly Detail[];
  /** At least one; spans count in `text`. */
  readonly turns: readonly Turn[];
  /** In the order of the document. */
  readonly notes: readonly SideNote[];
}

/** A table as it was in its file: every cell as text. */
export interface ReadTable {
  readonly format: TableFormat;
  /** At least one; a CSV file is one sheet without a name. */
  readonly sheets: readonly Sheet[];
}

export interface Sheet {
  readonly name: string;
  /** The first row holds the headings; all rows are of one length. */
  readonly rows: readonly (readonly string[])[];
}

/** Why a file could not be read; main/sentences turns each code into words. */
export type ReadRefusal =
  /** No bytes, or nothing but white space. */
  | { readonly ok: false; readonly code: 'empty file' }
  /** Bytes that are no writing. */
  | { readonly ok: false; readonly code: 'not text' }
  /** Writing, but in none of the encodings that can be told apart. */
  | { readonly ok: false; readonly code: 'unknown encoding' }
  /** A format that is not read, by the name people know it by. */
  | { readonly ok: false; readonly code: 'unknown format'; readonly format: string }
  /** Says that it is a format and breaks its rules; `where` says where, if that is known. */
  | {
      readonly ok: false;
      readonly code: 'broken file';
      readonly format: Format;
      readonly where?: string;
    }
  /** Protected with a password. */
  | { readonly ok: false; readonly code: 'locked file' }
  /** Pages that are pictures, without any text. */
  | { readonly ok: false; readonly code: 'scanned'; readonly pages: number }
  /** Holds or unpacks to more than can be worked with; `megabytes` is null where nobody counted. */
  | {
      readonly ok: false;
      readonly code: 'too large';
      readonly megabytes: number | null;
      readonly limit: number;
    }
  /** Was given up after so many seconds. */
  | { readonly ok: false; readonly code: 'too slow'; readonly seconds: number }
  /** Nothing but headings or empty cues. */
  | { readonly ok: false; readonly code: 'no speech'; readonly format: Format }
  /** A table of answers, where a transcript was wanted. */
  | { readonly ok: false; readonly code: 'a table' };

export type ReadResult = { readonly ok: true; readonly value: ReadFile } | ReadRefusal;

/** What a file turned out to be. */
export type ReadSource =
  | { readonly ok: true; readonly kind: 'transcript'; readonly value: ReadFile }
  | { readonly ok: true; readonly kind: 'table'; readonly value: ReadTable }
  | ReadRefusal;

/** The lines of a document, before they are divided into turns. */
export type ReadDocument =
  { readonly ok: true; readonly text: string; readonly notes: readonly SideNote[] } | ReadRefusal;
