/**
 * What a readable text is when it is no transcript, by its beginning or, where that says nothing, by
 * the ending of its name; null for a transcript.
 */
export function otherTextFormat(text: string, fileName: string): string | null {
  if (text.slice(0, 400).trimStart().toLowerCase().startsWith('<?xml')) {
    return /\.qdc$/iu.test(fileName) ? 'qdc' : 'xml';
  }
  const ending = /\.([^./\\]+)$/.exec(fileName)?.[1]?.toLowerCase() ?? '';
  return endings.has(ending) ? ending : null;
}

const endings: ReadonlySet<string> = new Set([
  'json',
  'xml',
  'css',
  'js',
  'ts',
  'py',
  'r',
  'yaml',
  'yml',
  'toml',
  'ini',
  'tex',
  'bib',
  'svg',
]);
