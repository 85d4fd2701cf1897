import type { NamedFile } from '../../main/api.ts';

const kinds: Readonly<Record<string, string>> = {
  csv: 'text/csv;charset=utf-8',
  json: 'application/json',
  html: 'text/html;charset=utf-8',
  md: 'text/markdown;charset=utf-8',
  svg: 'image/svg+xml',
  png: 'image/png',
  docx: 'application/vnd.openxmlformats-officedocument.wordprocessingml.document',
};

/** Gives a file to the browser's downloads. */
export function handOver({ fileName, bytes }: NamedFile): void {
  const type = kinds[fileName.split('.').at(-1) ?? ''] ?? 'application/octet-stream';
  // A copy: the bytes may lie in a buffer that is shared, which a blob does not take.
  const address = URL.createObjectURL(new Blob([new Uint8Array(bytes)], { type }));
  const link = document.createElement('a');
  link.href = address;
  link.download = fileName;
  link.click();
  // Some browsers begin to read only after the click has been dealt with.
  setTimeout(() => URL.revokeObjectURL(address), 60_000);
}
