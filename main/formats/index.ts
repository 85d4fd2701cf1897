export { decode } from './decode.ts';
export { readTranscript } from './read-transcript.ts';
export type { Format, ReadFile, ReadRefusal, ReadResult } from './read-file.ts';
