/** A clock time as transcripts write it: 0:05, 12:31, 1:02:03, 00:12:31.250; no groups. */
export const clockPattern = String.raw`\d{1,3}(?::[0-5]\d){1,2}(?:[.,]\d{1,3})?`;

/** Milliseconds of a time that `clockPattern` matches; two parts are minutes and seconds. */
export function clockMilliseconds(clock: string): number {
  const [whole = '', fraction = ''] = clock.split(/[.,]/);
  const seconds = whole.split(':').reduce((total, part) => total * 60 + Number(part), 0);
  return seconds * 1000 + Number(fraction.padEnd(3, '0'));
}
