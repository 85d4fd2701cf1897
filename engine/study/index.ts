export * from './study.ts';
export type {
  CodingKnown,
  CodingState,
  Edit,
  EditKind,
  EditOf,
  Entry,
  TextState,
  TranscriptDescription,
} from './edit.ts';
export {
  done,
  refusalCodes,
  refused,
  type Refusal,
  type RefusalCode,
  type Result,
} from './refusal.ts';
export { apply, closesTrail, editKinds, fold, inverse } from './apply.ts';
export { takingBack, type TakingBack } from './undo.ts';
export { coldSampleOf, isHeldBack } from './draws.ts';
export { turnsOf } from './edits/forgetting.ts';
export { descriptionOf, spansLost } from './edits/transcripts.ts';
export { spanFault } from './edits/codings.ts';
export {
  fittedThemes,
  isModelled,
  nameKey,
  resolveTheme,
  themesWithDecisions,
  visibleThemes,
} from './themes.ts';
