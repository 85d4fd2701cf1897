import type { ReportFormat } from '../../../main/api.ts';

export interface Output {
  readonly format: ReportFormat;
  readonly label: string;
  readonly note: string;
  /** Whether it holds the excerpts as ticked, or speaks of the whole study. */
  readonly holds: 'excerpts' | 'the whole study';
}

export const outputs: readonly Output[] = [
  {
    format: 'docx',
    label: 'Document',
    note: 'Excerpts under their themes, for a word processor (.docx)',
    holds: 'excerpts',
  },
  {
    format: 'html',
    label: 'Page',
    note: 'The same as one page for reading and printing (.html)',
    holds: 'excerpts',
  },
  {
    format: 'csv',
    label: 'Table of excerpts',
    note: 'A row an excerpt, with attributes, for a spreadsheet (.csv)',
    holds: 'excerpts',
  },
  {
    format: 'json',
    label: 'Excerpts for programs',
    note: 'Everything in the table, for other software (.json)',
    holds: 'excerpts',
  },
  {
    format: 'themes csv',
    label: 'Table of themes',
    note: 'Names, words, seeds and shares of all themes (.csv)',
    holds: 'the whole study',
  },
  {
    format: 'methods',
    label: 'Methods paragraph',
    note: 'How the themes came about, with every parameter (.md)',
    holds: 'the whole study',
  },
];
