export { countedForm } from './counted-form.ts';
export * from './identifiers/index.ts';
export { guessInterviewers } from './interviewers.ts';
export { isLanguage, languages, type Language } from './language.ts';
export { passagesOf, type Passage } from './passages.ts';
export {
  prepare,
  tallyLeftOut,
  type LeftOutReason,
  type LeftOutWord,
  type Prepared,
  type PreparedPassage,
  type SurfaceForm,
  type WordCounts,
} from './prepare.ts';
export { sentencesOf } from './sentences.ts';
export {
  defaultTextSettings,
  preparationMethod,
  type LanguageLists,
  type TextSettings,
  type WordLists,
} from './settings.ts';
export { searchForm, stemmerFor } from './stemming.ts';
export { participantOf, roleOf, speakerKey, type TranscriptText } from './transcript.ts';
export { labelledLines, turnsFromText, type LabelledLine, type TurnsOfText } from './turns.ts';
export { createWordScanner, formOf, wordsOf, type Word, type WordScanner } from './words.ts';
