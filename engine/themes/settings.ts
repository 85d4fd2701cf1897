import type { FitSettings } from '../model/index.ts';
import { defaultFitSettings, quickFitSettings } from '../model/index.ts';
import type { SettingValue, SettingValues } from '../study/index.ts';
import { defaultTextSettings, isLanguage, languages, type TextSettings } from '../text/index.ts';

/** Everything that can be set in a study, with its default. Keys are stored; do not rename them. */
export const defaultSettings = {
  themes: 12,
  seed: 1,
  answer: 'full',
  alpha: 0.1,
  eta: 0.1,
  suggestionStrength: 0.5,
  suggestionCountedWords: 1,
  followChanges: false,
  'text.language': defaultTextSettings.language,
  'text.passageMinimumWords': defaultTextSettings.passageMinimumWords,
  'text.passageMaximumWords': defaultTextSettings.passageMaximumWords,
  'text.shortTurnWords': defaultTextSettings.shortTurnWords,
  'text.stemming': defaultTextSettings.stemming,
  'text.leaveOutStopWords': defaultTextSettings.leaveOutStopWords,
  'text.leaveOutFillers': defaultTextSettings.leaveOutFillers,
  'text.extraStopWords': defaultTextSettings.extraStopWords,
  'text.keptWords': defaultTextSettings.keptWords,
  'text.minimumPassages': defaultTextSettings.minimumPassages,
  'text.minimumParticipants': defaultTextSettings.minimumParticipants,
  'text.maximumPassageShare': defaultTextSettings.maximumPassageShare,
} satisfies SettingValues;

export type SettingKey = keyof typeof defaultSettings;

export interface StudySettings {
  /** How many themes a fit from scratch looks for. */
  readonly themes: number;
  readonly seed: number;
  readonly alpha: number;
  readonly eta: number;
  /** Whether a re-fit follows each decision that it would take up. */
  readonly followChanges: boolean;
  readonly suggestions: { readonly strength: number; readonly countedWords: number };
  readonly text: TextSettings;
  readonly model: FitSettings;
}

/** A study's settings with defaults for what is not set. */
export function settingsOf(values: SettingValues): StudySettings {
  const all = { ...defaultSettings, ...values } as typeof defaultSettings;
  return {
    themes: all.themes,
    seed: all.seed,
    alpha: all.alpha,
    eta: all.eta,
    followChanges: all.followChanges,
    suggestions: { strength: all.suggestionStrength, countedWords: all.suggestionCountedWords },
    text: {
      language: all['text.language'],
      passageMinimumWords: all['text.passageMinimumWords'],
      passageMaximumWords: all['text.passageMaximumWords'],
      shortTurnWords: all['text.shortTurnWords'],
      stemming: all['text.stemming'],
      leaveOutStopWords: all['text.leaveOutStopWords'],
      leaveOutFillers: all['text.leaveOutFillers'],
      extraStopWords: all['text.extraStopWords'],
      keptWords: all['text.keptWords'],
      minimumPassages: all['text.minimumPassages'],
      minimumParticipants: all['text.minimumParticipants'],
      maximumPassageShare: all['text.maximumPassageShare'],
    },
    model: all.answer === 'quick' ? quickFitSettings : defaultFitSettings,
  };
}

/** Everything a fit depends on besides texts and decisions, defaults included, as it is recorded. */
export function recordedSettings(values: SettingValues): SettingValues {
  const { model } = settingsOf(values);
  const recorded: Record<string, SettingValue> = { ...defaultSettings, ...values };
  for (const [key, value] of Object.entries(model)) {
    recorded[`model.${key}`] = Array.isArray(value)
      ? (value as FitSettings['schedule']).map(
          ({ exponent, sweeps }) => `${sweeps} sweeps at exponent ${exponent}`,
        )
      : (value as number);
  }
  return recorded;
}

export type SettingFault = { readonly key: string; readonly must: string };

const whole = (least: number, most: number) => (value: SettingValue) =>
  typeof value === 'number' && Number.isInteger(value) && value >= least && value <= most
    ? null
    : `must be a whole number from ${least} to ${most}`;
const real = (least: number, most: number) => (value: SettingValue) =>
  typeof value === 'number' && value >= least && value <= most
    ? null
    : `must be a number from ${least} to ${most}`;
const yesOrNo = (value: SettingValue) =>
  typeof value === 'boolean' ? null : 'must be true or false';
const words = (value: SettingValue) =>
  Array.isArray(value) && value.every((word) => typeof word === 'string' && word.trim() !== '')
    ? null
    : 'must be a list of words';

const checks: Record<SettingKey, (value: SettingValue) => string | null> = {
  themes: whole(1, 200),
  seed: whole(0, 4_294_967_295),
  answer: (value) => (value === 'full' || value === 'quick' ? null : 'must be full or quick'),
  alpha: real(0.001, 100),
  eta: real(0.001, 100),
  suggestionStrength: real(0, 1),
  suggestionCountedWords: whole(1, 1000),
  followChanges: yesOrNo,
  'text.language': (value) =>
    typeof value === 'string' && isLanguage(value)
      ? null
      : `must be one of ${languages.join(', ')}`,
  'text.passageMinimumWords': whole(1, 1000),
  'text.passageMaximumWords': whole(2, 5000),
  'text.shortTurnWords': whole(0, 20),
  'text.stemming': yesOrNo,
  'text.leaveOutStopWords': yesOrNo,
  'text.leaveOutFillers': yesOrNo,
  'text.extraStopWords': words,
  'text.keptWords': words,
  'text.minimumPassages': whole(1, 1000),
  'text.minimumParticipants': whole(1, 100),
  'text.maximumPassageShare': real(0.01, 1),
};

/** What is wrong with settings, each and together, or null; what is missing has its default. */
export function settingsFault(values: SettingValues): SettingFault | null {
  for (const [key, value] of Object.entries(values)) {
    const fault = settingFault(key, value);
    if (fault !== null) return fault;
  }
  const { passageMinimumWords: least, passageMaximumWords: most } = settingsOf(values).text;
  return least < most
    ? null
    : { key: 'text.passageMinimumWords', must: `must be below text.passageMaximumWords (${most})` };
}

/** What is wrong with a setting by itself, or null. */
export function settingFault(key: string, value: SettingValue): SettingFault | null {
  if (!Object.hasOwn(checks, key)) return { key, must: 'is not a setting' };
  const must = checks[key as SettingKey](value);
  return must === null ? null : { key, must };
}
