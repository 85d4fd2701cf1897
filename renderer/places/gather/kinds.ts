import type { IdentifierDecision, IdentifierKind } from '../../../main/api.ts';

/** What several of a kind are called. */
export const kindWords: Readonly<Record<IdentifierKind, string>> = {
  person: 'Names of persons',
  place: 'Places',
  organisation: 'Organisations',
  'other name': 'Boats, animals and other names',
  'e-mail': 'E-mail addresses',
  telephone: 'Telephone numbers',
  web: 'Web addresses',
  date: 'Dates',
  age: 'Ages over 89',
  postcode: 'Postcodes',
  number: 'Account and registration numbers',
};

/** What can be done with one, as a person chooses it. */
export const decisions: readonly { readonly value: IdentifierDecision; readonly label: string }[] =
  [
    { value: 'stand-in', label: 'put a stand-in' },
    { value: 'generalised', label: 'say what kind of thing it is' },
    { value: 'left', label: 'leave it as it is' },
    { value: 'not identifying', label: 'not a name' },
  ];

export const decided: Readonly<Record<IdentifierDecision, string>> = {
  'stand-in': 'stand-in',
  generalised: 'generalised',
  left: 'left as it is',
  'not identifying': 'not a name',
};

export function replaces(decision: IdentifierDecision): boolean {
  return decision === 'stand-in' || decision === 'generalised';
}
