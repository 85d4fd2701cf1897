/** Why an edit cannot be made. main/sentences turns each code into words. */
export const refusalCodes = [
  'already there',
  'changed since',
  'code taken',
  'codings remain',
  'empty name',
  'field notes remain',
  'fit is in use',
  'fitted already',
  'heading in use',
  'memos remain',
  'merge into itself',
  'merged theme',
  'name taken',
  'no speaker',
  'not a participant',
  'nothing to undo',
  'outside the text',
  'participant in use',
  'question in use',
  'reader in use',
  'same as before',
  'shut out everywhere',
  'study already started',
  'study not started',
  'theme by hand',
  'theme in use',
  'theme set aside',
  'unknown coding',
  'unknown field note',
  'unknown draw',
  'unknown fit',
  'unknown heading',
  'unknown memo',
  'unknown participant',
  'unknown question',
  'unknown reader',
  'unknown theme',
  'unknown transcript',
  'unusable value',
  'word not seeded there',
  'word not shut out there',
  'word seeded there',
  'word shut out there',
] as const;

export type RefusalCode = (typeof refusalCodes)[number];

export interface Refusal {
  readonly ok: false;
  readonly code: RefusalCode;
  /** The name, word or id that the code speaks of. */
  readonly subject: string;
}

export type Result<Value> = { readonly ok: true; readonly value: Value } | Refusal;

export function done<Value>(value: Value): Result<Value> {
  return { ok: true, value };
}

export function refused(code: RefusalCode, subject: string): Refusal {
  return { ok: false, code, subject };
}
