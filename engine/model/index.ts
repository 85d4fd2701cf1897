export type {
  BoundTerms,
  Counts,
  ModelFit,
  Priors,
  Start,
  StopReason,
  TracePoint,
  Watcher,
} from './types.ts';
export { fitModel } from './fit-model.ts';
export {
  defaultFitSettings,
  methodNumber,
  quickFitSettings,
  type FitSettings,
  type Stage,
} from './settings.ts';
