import { concentration, sameQuestion, type Concentration } from '../engine/evidence/index.ts';
import { leadingRow, settingsOf, type Fitted } from '../engine/themes/index.ts';
import type { Desk } from './desk.ts';

/** Where one theme's words come from. */
export interface ThemeConcentration {
  /** By participant id. */
  readonly people: Concentration;
  /** By question; `most` is the question as it stands in a transcript. */
  readonly questions: Concentration;
}

/** Concentration of every theme of a fit over people and over questions, in the rows of the fit. */
export function themeConcentrations(desk: Desk, fitted: Fitted): ThemeConcentration[] {
  const { passages } = fitted.words;
  const { language } = settingsOf(fitted.fit.settings).text;
  const wordings = new Map<string, string>();
  const questions = passages.map(({ transcript, questionBefore }) => {
    if (questionBefore === null) return null;
    const text = desk.text(transcript);
    const question = sameQuestion(text, questionBefore, language);
    if (question !== null && !wordings.has(question)) {
      wordings.set(question, text.slice(questionBefore.start, questionBefore.end));
    }
    return question;
  });
  const words = passages.map(({ countedWords }) => countedWords);
  const leads = passages.map((_passage, index) => leadingRow(fitted, index));
  const over = (groups: readonly (string | null)[]): Concentration[] =>
    concentration(groups, words, fitted.theta, leads, fitted.fit.themes.length);
  const people = over(passages.map(({ participant }) => participant));
  return over(questions).map((one, row) => ({
    people: people[row],
    questions: { ...one, most: one.most === null ? null : (wordings.get(one.most) ?? null) },
  }));
}
