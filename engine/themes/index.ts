export { askedOf } from './asked.ts';
export { compareFits, type FitComparison, type FitPair } from './compare-fits.ts';
export { decisions, type Decided } from './decided.ts';
export type { FitJob, PreviousFit, RememberedTheme, Split } from './fit-job.ts';
export {
  beginFit,
  fitStudy,
  packFit,
  type FitBegun,
  type FitDone,
  type FitRefused,
} from './fit-study.ts';
export { leadingRow, rowOf, shareOf, strengthOf, type Fitted } from './fitted.ts';
export { modelledThemes, type ModelledTheme } from './modelled-theme.ts';
export {
  movedLimits,
  whatMoved,
  type Moved,
  type MovedLimits,
  type MovedPassage,
  type MovedWords,
} from './moved.ts';
export { seedConcern, seedLimits, type SeedConcern, type SeedLimits } from './seed-concerns.ts';
export {
  defaultSettings,
  recordedSettings,
  settingFault,
  settingsFault,
  settingsOf,
  type SettingFault,
  type SettingKey,
  type StudySettings,
} from './settings.ts';
export { packResult, packWords, unpackFitted, unpackWords } from './stored.ts';
export { leaning } from './split.ts';
export {
  asPrevious,
  foundTheme,
  refitFromStored,
  rememberedThemes,
  storedJob,
} from './stored-job.ts';
export { passagesLed, suggestions, type Suggestion, type SuggestionLimits } from './suggestions.ts';
export { termScores } from './term-scores.ts';
export { candidateWords, topWords, type ThemeWord } from './top-words.ts';
export { proportionsWithoutDecisions, themeAlphaOf } from './without-decisions.ts';
