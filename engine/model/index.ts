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
export { prepareFit, type Prepared } from './collapsed/prepare.ts';
export { poolRun, type FreshStart, type Run } from './collapsed/runs.ts';
export { finishPool, fitModel, poolSize } from './fit-model.ts';
export { leadingThemes } from './leading-themes.ts';
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
