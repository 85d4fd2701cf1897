import type { Refused } from '../api.ts';
import { windowSentences, type WindowRefusalCode } from '../sentences/window.ts';

export function give<Value>(value: Value): { readonly value: Value } {
  return { value };
}

/** A refusal that only a window can meet, in words. */
export function refuse(code: WindowRefusalCode, subject = ''): Refused {
  return { code, refused: windowSentences[code](subject) };
}

export function isRefused(answer: unknown): answer is Refused {
  return typeof answer === 'object' && answer !== null && 'refused' in answer;
}
