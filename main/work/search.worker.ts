import { parentPort } from 'node:worker_threads';
import {
  findIdentifiers,
  groupIdentifiers,
  scanText,
  type Scanned,
  type SearchedText,
} from '../../engine/text/index.ts';
import { nameLists } from '../name-lists.ts';
import type { ForgetRequest, SearchRequest } from './name-search.ts';

interface Read {
  readonly text: SearchedText;
  readonly scanned: Scanned;
}

const studies = new Map<number, Map<string, Read>>();

parentPort?.on('message', (request: SearchRequest | ForgetRequest) => {
  if ('forget' in request) {
    studies.delete(request.forget);
    return;
  }
  const { study, number, changed, order } = request;
  const read = studies.get(study) ?? new Map<string, Read>();
  studies.set(study, read);
  for (const text of changed) read.set(text.id, { text, scanned: scanText(text) });
  const kept = new Set(order);
  for (const id of [...read.keys()]) if (!kept.has(id)) read.delete(id);
  const found = findIdentifiers(
    order.map((id) => read.get(id)!.scanned),
    nameLists(),
  );
  const groups = groupIdentifiers(found, (id) => read.get(id)!.text.text);
  parentPort?.postMessage({ number, groups });
});
