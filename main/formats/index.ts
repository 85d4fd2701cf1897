export { decode } from './decode.ts';
export { mostFileMegabytes } from './limits.ts';
export { readNote, readSource, readTranscript } from './read-transcript.ts';
export type {
  DocumentFormat,
  Format,
  ReadFile,
  ReadRefusal,
  ReadResult,
  ReadSource,
  ReadTable,
  Sheet,
  SideNote,
} from './read-file.ts';
export { readCsv } from './table.ts';
export { walkXml } from './xml.ts';
