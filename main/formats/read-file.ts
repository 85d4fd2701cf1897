import type { Detail, Turn } from '../../engine/spans/index.ts';

/** The formats that can be read. */
export type Format = 'text' | 'vtt' | 'srt' | 'docx';

/** A transcript as it was in its file. */
export interface ReadFile {
  readonly format: Format;
  /** The canonical text: decoded, no byte order mark, LF line ends, otherwise untouched. */
  readonly text: string;
  readonly details: readonly Detail[];
  /** At least one; spans count in `text`. */
  readonly turns: readonly Turn[];
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
  /** Says that it is a format and breaks its rules. */
  | { readonly ok: false; readonly code: 'broken file'; readonly format: Format }
  /** Protected with a password. */
  | { readonly ok: false; readonly code: 'locked file' }
  /** Unpacks to more than can be worked with. */
  | {
      readonly ok: false;
      readonly code: 'too large';
      readonly megabytes: number;
      readonly limit: number;
    }
  /** Nothing but headings or empty cues. */
  | { readonly ok: false; readonly code: 'no speech'; readonly format: Format };

export type ReadResult = { readonly ok: true; readonly value: ReadFile } | ReadRefusal;
