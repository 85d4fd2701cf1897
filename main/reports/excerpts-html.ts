import {
  attribution,
  bookCautions,
  bookParts,
  filterSentence,
  headSentence,
  type ReportFilter,
} from './excerpt-book.ts';
import type { CodedExcerpt } from './coded-excerpts.ts';

/** Coded excerpts as one HTML page that needs nothing else: no script, no picture, no font file. */
export function excerptsHtml(
  study: string,
  excerpts: readonly CodedExcerpt[],
  filter: ReportFilter,
  head: string,
): string {
  const parts = bookParts(excerpts).map(
    ({ theme, excerpts: own, participants }) => `<section>
<h2>${escaped(theme)}</h2>
<p class="count">${own.length} from ${participants} ${participants === 1 ? 'person' : 'people'}</p>
${own.map(article).join('\n')}
</section>`,
  );
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta name="viewport" content="width=device-width">
<meta http-equiv="Content-Security-Policy" content="default-src 'none'; style-src 'unsafe-inline'">
<title>${escaped(study)}: coded excerpts</title>
<style>
body { font: 17px/1.6 Georgia, serif; max-width: 42em; margin: 3em auto; padding: 0 1.5em; color: #23302a; background: #fdfcf9; }
h1, h2 { line-height: 1.25; margin: 2em 0 .3em; } h1 { margin-top: 0; }
.count, .filter, footer, .caution, .head { font: 14px/1.5 system-ui, sans-serif; color: #4d5952; }
blockquote { margin: 1.5em 0 .3em; padding: 0; white-space: pre-wrap; }
.question { color: #4d5952; font-style: italic; margin: 1.5em 0 -1em; white-space: pre-wrap; }
.head { margin-top: 3em; overflow-wrap: anywhere; }
.memo { font: 14px/1.5 system-ui, sans-serif; margin: .3em 0 0; }
</style>
</head>
<body>
<h1>${escaped(study)}</h1>
<p class="filter">${escaped(filterSentence(filter, excerpts.length))}</p>
${bookCautions.map((caution) => `<p class="caution">${escaped(caution)}</p>`).join('\n')}
${parts.join('\n')}
<p class="head">${escaped(headSentence(head))}</p>
</body>
</html>
`;
}

function article(excerpt: CodedExcerpt): string {
  const question =
    excerpt.questionBefore === ''
      ? ''
      : `<p class="question">${escaped(excerpt.questionBefore)}</p>\n`;
  const memo = excerpt.memo === '' ? '' : `\n<p class="memo">Memo: ${escaped(excerpt.memo)}</p>`;
  return `<article>
${question}<blockquote>${escaped(excerpt.text)}</blockquote>
<footer>${escaped(attribution(excerpt))}</footer>${memo}
</article>`;
}

function escaped(text: string): string {
  return text
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}
