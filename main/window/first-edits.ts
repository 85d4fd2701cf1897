import type { Reader } from '../../engine/study/index.ts';
import type { Draft } from '../desk.ts';

/** A share of fewer words says too little to be shown to somebody who reads passage by passage. */
const countedWordsOfSuggestions = 8;

/** What every study that is started in a window begins with. */
export function firstEdits(id: string, name: string, reader: Reader): Draft[] {
  return [
    { edit: { kind: 'studyStarted', study: id, name } },
    { edit: { kind: 'readerAdded', reader } },
    {
      edit: {
        kind: 'settingsChanged',
        changes: [{ key: 'suggestionCountedWords', from: null, to: countedWordsOfSuggestions }],
      },
    },
  ];
}
