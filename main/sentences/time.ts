/** A moment as a sentence says it, whatever the machine's language: "2026-02-01 09:30 UTC". */
export function timeInWords(at: string): string {
  const match = /^(\d{4}-\d\d-\d\d)T(\d\d:\d\d)(?::[\d.]+)?Z$/u.exec(at);
  return match === null ? at : `${match[1]} ${match[2]} UTC`;
}
