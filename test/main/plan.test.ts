import { describe, expect, test } from 'vitest';
import { emptyPlan, parsePlan } from '../../main/plan.ts';

describe('a plan', () => {
  test('may be empty', () => {
    expect(parsePlan('{}')).toEqual({ ok: true, value: emptyPlan });
    expect(emptyPlan).toEqual({ themes: [], interviewers: [], codings: [], settings: {} });
  });

  test('holds themes, interviewers, codings and settings', () => {
    const plan = {
      themes: [
        { name: ' Work ', seed: ['paid'], shutOut: ['not'], pin: false },
        { id: 'abc', brief: 'Why.', byHand: true, setAside: true, merge: ['Other'] },
      ],
      interviewers: ['INT'],
      codings: [{ transcript: 'P01', start: 0, end: 9, theme: 'Work', standing: 'by hand' }],
      settings: {
        seed: 3,
        'text.stemming': true,
        'text.extraStopWords': ['well'],
        answer: 'quick',
      },
    };
    expect(parsePlan(JSON.stringify(plan))).toEqual({
      ok: true,
      value: {
        ...plan,
        themes: [
          { ...plan.themes[0], name: 'Work', byHand: false, merge: [] },
          { ...plan.themes[1], seed: [], shutOut: [] },
        ],
        codings: [{ ...plan.codings[0], memo: '' }],
      },
    });
  });

  test.each<[string, string, string]>([
    ['{"a":1}', 'unknown plan key', 'a'],
    ['{"themes":[{"name":"A"},{"name":"B","seeds":[]}]}', 'unknown plan key', 'themes[1].seeds'],
    ['{"themes":{}}', 'plan value', 'themes'],
    ['{"themes":[1]}', 'plan value', 'themes[0]'],
    ['{"themes":[{"name":"A","seed":[""]}]}', 'plan value', 'themes[0].seed[0]'],
    ['{"interviewers":"INT"}', 'plan value', 'interviewers'],
    ['{"codings":[{"transcript":"a","start":0.5,"end":1}]}', 'plan value', 'codings[0].start'],
    ['{"codings":[{"transcript":"a","start":-1,"end":1}]}', 'plan value', 'codings[0].start'],
    ['{"settings":{"seed":{}}}', 'plan value', 'settings.seed'],
    ['[]', 'plan value', ''],
    ['null', 'plan value', ''],
    ['"themes"', 'plan value', ''],
    ['', 'plan is not JSON', ''],
    ['{themes:[]}', 'plan is not JSON', ''],
  ])('%s is refused, with the place', (text, code, place) => {
    const parsed = parsePlan(text);
    expect(parsed).toMatchObject({ ok: false, code, place });
    if (!parsed.ok) expect(parsed.problem).not.toMatch(/Expected|Invalid/u);
  });
});
