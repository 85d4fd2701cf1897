export { groupIdentifiers, keyOf, type IdentifierGroup } from './groups.ts';
export { nameKeyOf, type NameLists } from './lists.ts';
export {
  findIdentifiers,
  scanText,
  type Occurrence,
  type Scanned,
  type SearchedText,
} from './names.ts';
export { shiftDate } from './shift-date.ts';
export { shapedIdentifiers, type Shaped } from './patterns.ts';
