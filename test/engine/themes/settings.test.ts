import { describe, expect, test } from 'vitest';
import {
  defaultSettings,
  recordedSettings,
  settingFault,
  settingsFault,
  settingsOf,
  type SettingKey,
} from '../../../engine/themes/index.ts';

describe('settings', () => {
  test('every default is one that may be set', () => {
    for (const [key, value] of Object.entries(defaultSettings)) {
      expect(settingFault(key, value)).toBeNull();
    }
    expect(settingsFault({})).toBeNull();
  });

  test('what is not set has its default', () => {
    const { themes, seed, text, suggestions } = settingsOf({ seed: 7, 'text.stemming': true });
    expect({ themes, seed, stemming: text.stemming }).toEqual({
      themes: 12,
      seed: 7,
      stemming: true,
    });
    expect(suggestions.strength).toBe(0.5);
  });

  test('a quick answer has a shorter schedule', () => {
    const sweeps = (answer: string): number => {
      const { model } = settingsOf({ answer });
      return model.schedule.reduce((sum, stage) => sum + stage.sweeps, 0) * model.runs;
    };
    expect(sweeps('quick')).toBeLessThan(sweeps('full') / 3);
  });

  test('a fit records all of them, defaults and schedule included', () => {
    const recorded = recordedSettings({ seed: 7 });
    expect(recorded).toMatchObject({ ...defaultSettings, seed: 7 });
    expect(recorded['model.schedule']).toEqual([
      '20 sweeps at exponent 0.75',
      '20 sweeps at exponent 0.875',
      '30 sweeps at exponent 1',
    ]);
  });

  test.each<[SettingKey, unknown[]]>([
    ['themes', [0, 201, 1.5, '12', Number.NaN, null]],
    ['seed', [-1, 4_294_967_296, 0.5]],
    ['answer', ['slow', 1]],
    ['alpha', [0, -1, 101, Number.NaN, Infinity, '1']],
    ['eta', [0, 101]],
    ['suggestionStrength', [-0.1, 1.1, true]],
    ['suggestionCountedWords', [0, 1.5]],
    ['text.language', ['en', 'xyz', 1]],
    ['text.passageMinimumWords', [0, 1001]],
    ['text.passageMaximumWords', [1, 5001]],
    ['text.shortTurnWords', [-1, 21]],
    ['text.stemming', ['yes', 1]],
    ['text.leaveOutStopWords', [0]],
    ['text.leaveOutFillers', [null]],
    ['text.extraStopWords', ['word', [''], [' '], [1]]],
    ['text.keptWords', [true, [null]]],
    ['followChanges', ['yes', 1, null]],
    ['text.minimumPassages', [0]],
    ['text.minimumParticipants', [0, 101]],
    ['text.maximumPassageShare', [0, 1.01]],
  ])('%s is refused out of its range, with what it must be', (key, values) => {
    for (const value of values) {
      const fault = settingFault(key, value as never);
      expect(fault, JSON.stringify(value)).toMatchObject({ key });
      expect(fault?.must).toMatch(/^must be /u);
    }
  });

  test('every key has its limits tested above', () => {
    expect(Object.keys(defaultSettings)).toHaveLength(20);
  });

  test('an unknown key is refused, also one that every object has', () => {
    for (const key of ['speed', 'toString', '__proto__', 'constructor']) {
      expect(settingFault(key, 1)).toEqual({ key, must: 'is not a setting' });
    }
  });

  test('passages may not end before they begin', () => {
    expect(settingsFault({ 'text.passageMinimumWords': 120 })?.must).toContain('below');
    expect(settingsFault({ 'text.passageMaximumWords': 40 })?.must).toContain('below');
    expect(
      settingsFault({ 'text.passageMinimumWords': 120, 'text.passageMaximumWords': 121 }),
    ).toBeNull();
  });
});
