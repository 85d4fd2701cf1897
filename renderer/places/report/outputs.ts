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
    note: 'word processor, .docx',
    holds: 'excerpts',
  },
  {
    format: 'html',
    label: 'Page',
    note: 'to read or print, .html',
    holds: 'excerpts',
  },
  {
    format: 'csv',
    label: 'Table of excerpts',
    note: 'spreadsheet, .csv',
    holds: 'excerpts',
  },
  {
    format: 'json',
    label: 'Excerpts as data',
    note: 'other software, .json',
    holds: 'excerpts',
  },
  {
    format: 'themes csv',
    label: 'Table of themes',
    note: 'spreadsheet, .csv',
    holds: 'the whole study',
  },
  {
    format: 'methods',
    label: 'Methods paragraph',
    note: 'plain text, .md',
    holds: 'the whole study',
  },
];
