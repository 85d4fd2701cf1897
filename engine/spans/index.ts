export { belongsTo, overlap, sameSpan, type Span } from './span.ts';
export {
  invertReplacements,
  mapOffset,
  mapSpan,
  type Replacement,
  type Side,
} from './replacements.ts';
export { identifierKinds, type IdentifierKind } from './identifier-kind.ts';
export type { Detail, Role, Turn } from './turn.ts';
