import { Document, HeadingLevel, Packer, Paragraph, TextRun } from 'docx';
import {
  attribution,
  bookCautions,
  bookParts,
  filterSentence,
  headSentence,
  type ReportFilter,
} from './excerpt-book.ts';
import type { CodedExcerpt } from './coded-excerpts.ts';

/** Coded excerpts as a word-processor document with a heading for each theme. */
export async function excerptsDocx(
  study: string,
  excerpts: readonly CodedExcerpt[],
  filter: ReportFilter,
  head: string,
): Promise<Uint8Array> {
  const quiet = { color: '4D5952', size: 19 };
  const children = [
    new Paragraph({ heading: HeadingLevel.TITLE, text: study }),
    new Paragraph({
      children: [new TextRun({ ...quiet, text: filterSentence(filter, excerpts.length) })],
    }),
    ...bookCautions.map(
      (text) =>
        new Paragraph({ spacing: { after: 120 }, children: [new TextRun({ ...quiet, text })] }),
    ),
    ...bookParts(excerpts).flatMap((part) => [
      new Paragraph({ heading: HeadingLevel.HEADING_1, text: part.theme }),
      ...part.excerpts.flatMap((excerpt) => paragraphsOf(excerpt, quiet)),
    ]),
    new Paragraph({
      spacing: { before: 480 },
      children: [new TextRun({ ...quiet, text: headSentence(head) })],
    }),
  ];
  const document = new Document({
    creator: 'Understory',
    title: `${study}: coded excerpts`,
    sections: [{ children }],
  });
  return new Uint8Array(await Packer.toBuffer(document));
}

function paragraphsOf(
  excerpt: CodedExcerpt,
  quiet: { readonly color: string; readonly size: number },
): Paragraph[] {
  const lines = (text: string, style: object): TextRun[] =>
    text
      .split('\n')
      .map((line, index) => new TextRun({ ...style, text: line, break: index === 0 ? 0 : 1 }));
  return [
    ...(excerpt.questionBefore === ''
      ? []
      : [
          new Paragraph({
            keepNext: true,
            spacing: { before: 240 },
            children: lines(excerpt.questionBefore, { italics: true, color: quiet.color }),
          }),
        ]),
    new Paragraph({
      keepNext: true,
      spacing: { before: excerpt.questionBefore === '' ? 240 : 80 },
      children: lines(excerpt.text, {}),
    }),
    new Paragraph({
      spacing: { after: 160 },
      children: [
        new TextRun({ ...quiet, text: attribution(excerpt) }),
        ...(excerpt.memo === ''
          ? []
          : [new TextRun({ ...quiet, break: 1, text: `Memo: ${excerpt.memo}` })]),
      ],
    }),
  ];
}
