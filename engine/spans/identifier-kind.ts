/** What kinds of things could tell who somebody is. */
export const identifierKinds = [
  'person',
  'place',
  'organisation',
  'other name',
  'e-mail',
  'telephone',
  'web',
  'date',
  'age',
  'postcode',
  'number',
] as const;

export type IdentifierKind = (typeof identifierKinds)[number];
