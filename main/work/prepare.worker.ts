import { parentPort, workerData } from 'node:worker_threads';
import { prepare } from '../../engine/text/index.ts';
import { packWords } from '../../engine/themes/index.ts';
import type { PrepareJob } from './run-prepare.ts';

const { transcripts, text, lists, seeds } = workerData as PrepareJob;
const words = packWords(prepare(transcripts, text, lists, seeds));
parentPort?.postMessage(words, [words.buffer as ArrayBuffer]);
