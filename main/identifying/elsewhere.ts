import { descriptionOf, type Edit, type Study } from '../../engine/study/index.ts';
import { matcherOf, replaceForms } from './words-of.ts';

/** A name that stands outside the texts: in what people of the study wrote about it. */
export interface ElsewhereFound {
  /** "a memo", "the name of a theme". */
  readonly where: string;
  readonly text: string;
}

interface Change extends ElsewhereFound {
  readonly edit: Edit;
}

/**
 * Every place outside the texts where one of the forms stands, with the edit that puts the
 * replacement there. `labels` of speakers go with the texts and are not among them.
 */
function changes(study: Study, forms: readonly string[], replacement: string): Change[] {
  const matcher = matcherOf(forms);
  if (matcher === null) return [];
  const has = (text: string): boolean => text.search(matcher) >= 0;
  const put = (text: string): string => replaceForms(text, forms, replacement);
  const found: Change[] = [];
  if (has(study.name)) {
    found.push({
      where: 'the name of the study',
      text: study.name,
      edit: { kind: 'studyRenamed', from: study.name, to: put(study.name) },
    });
  }
  for (const transcript of study.transcripts.values()) {
    if (has(transcript.name)) {
      found.push({
        where: 'the name of a transcript',
        text: transcript.name,
        edit: {
          kind: 'transcriptRenamed',
          transcript: transcript.id,
          from: transcript.name,
          to: put(transcript.name),
        },
      });
    }
    const from = descriptionOf(transcript);
    const texts = [
      from.fileName,
      ...from.details.flatMap(({ name, value }) => [name, value]),
      from.facts?.interviewedBy ?? '',
    ];
    if (texts.some(has)) {
      const { interviewedBy } = from.facts ?? {};
      found.push({
        where: `the file name or the headings of ${transcript.name}`,
        text: texts.filter(has).join(' · '),
        edit: {
          kind: 'transcriptDescribed',
          transcript: transcript.id,
          from,
          to: {
            fileName: put(from.fileName),
            details: from.details.map(({ name, value }) => ({
              name: put(name),
              value: put(value),
            })),
            facts:
              from.facts === null || interviewedBy === undefined
                ? from.facts
                : { ...from.facts, interviewedBy: put(interviewedBy) },
          },
        },
      });
    }
  }
  for (const { id, name, attributes } of study.participants.values()) {
    const values = Object.entries(attributes);
    const texts = [name, ...values.flat()];
    if (!texts.some(has)) continue;
    found.push({
      where: 'a participant’s name or attributes',
      text: texts.filter(has).join(' · '),
      edit: {
        kind: 'participantDescribed',
        participant: id,
        from: { name, attributes },
        to: {
          name: put(name),
          attributes: Object.fromEntries(values.map(([key, value]) => [put(key), put(value)])),
        },
      },
    });
  }
  for (const { id, name, definition, version, mergedInto, seeds } of study.themes.values()) {
    if (mergedInto !== null) continue;
    if (name !== null && has(name)) {
      found.push({
        where: 'the name of a theme',
        text: name,
        edit: { kind: 'themeRenamed', theme: id, from: name, to: put(name) },
      });
    }
    const parts = Object.entries(definition) as [keyof typeof definition, string][];
    if (parts.some(([, text]) => has(text))) {
      found.push({
        where: 'the codebook entry of a theme',
        text: parts
          .map(([, text]) => text)
          .filter(has)
          .join(' · '),
        edit: {
          kind: 'themeDefined',
          theme: id,
          from: { version, definition },
          to: {
            version: version + 1,
            definition: {
              ...definition,
              ...Object.fromEntries(parts.map(([key, text]) => [key, put(text)])),
            },
          },
        },
      });
    }
    const small = matcherOf(forms.map((form) => form.toLowerCase()));
    for (const seed of seeds) {
      if (small === null || seed.search(small) < 0) continue;
      found.push({
        where: 'a seed word',
        text: seed,
        edit: { kind: 'wordUnseeded', theme: id, word: seed },
      });
    }
  }
  for (const memo of study.memos.values()) {
    if (!has(memo.text)) continue;
    found.push({
      where: 'a memo',
      text: memo.text,
      edit: { kind: 'memoRevised', memo: memo.id, from: memo.text, to: put(memo.text) },
    });
  }
  for (const [transcript, codings] of study.codings) {
    for (const { id, theme, standing, span, memo } of codings.values()) {
      if (!has(memo)) continue;
      const from = { theme, standing, span, memo };
      found.push({
        where: 'a memo on a coding',
        text: memo,
        edit: {
          kind: 'codingRevised',
          transcript,
          coding: id,
          from,
          to: { ...from, memo: put(memo) },
        },
      });
    }
  }
  return found;
}

export function foundElsewhere(study: Study, forms: readonly string[]): ElsewhereFound[] {
  return changes(study, forms, '').map(({ where, text }) => ({ where, text }));
}

export function elsewhereEdits(
  study: Study,
  forms: readonly string[],
  replacement: string,
): Edit[] {
  return changes(study, forms, replacement).map(({ edit }) => edit);
}
