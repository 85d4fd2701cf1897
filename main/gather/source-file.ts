import type { FoundFile } from './find-files.ts';

/** A file on the drive, or one whose bytes were handed over. */
export type SourceFile = FoundFile | HandedFile;

export interface HandedFile {
  readonly name: string;
  readonly bytes: Uint8Array;
}

/** A file that could not become a transcript, and why: main/sentences says it to a person. */
export interface SkippedFile {
  readonly file: string;
  readonly refusal: { readonly code: string };
}
