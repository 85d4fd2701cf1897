export type { Base } from './base.ts';
export {
  alike,
  calibration,
  fewestJudged,
  type Calibration,
  type CalibrationBin,
  type Judged,
} from './calibration.ts';
export { coherence } from './coherence.ts';
export { concentration, type Concentration } from './concentration.ts';
export type { NumberScores } from './how-many.ts';
export { atMost, wilson, type Interval } from './interval.ts';
export { dealt, fewestPeople, leftOut, leftOutEach } from './left-out.ts';
export { materialOf, peopleHeard, type Asked, type Material } from './material.ts';
export {
  evidenceMethod,
  howManyResult,
  planHowMany,
  planSteadiness,
  steadinessResult,
  type EvidenceRefused,
  type HowManyPlan,
  type HowManyResult,
  type SteadinessPlan,
  type SteadinessResult,
} from './plan.ts';
export { sameQuestion } from './question.ts';
export { recommend, type NumberPoint, type Recommendation } from './recommend.ts';
export { fitAnew, refitWithout, type Refit } from './refit.ts';
export { shuffled } from './shuffled.ts';
export {
  floorOf,
  steadinessOf,
  type Floor,
  type FitNumbers,
  type ThemeEvidence,
} from './steadiness.ts';
export { runTask, type Progress, type Task, type TaskResult, type TaskResults } from './tasks.ts';
export { unexplainedPassages, type Unexplained } from './unexplained.ts';
