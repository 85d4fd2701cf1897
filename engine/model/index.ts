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
export {
  defaultMeanFieldSettings,
  fitMeanField,
  foldInMeanField,
  type MeanFieldFit,
  type MeanFieldSettings,
} from './mean-field/fit.ts';
export * from './scores/index.ts';
