const units = ['bytes', 'kB', 'MB', 'GB'] as const;

/** A size as people say it: "812 bytes", "3.4 MB"; thousands, as file managers count. */
export function sized(bytes: number): string {
  let value = bytes;
  let unit = 0;
  while (value >= 1000 && unit < units.length - 1) {
    value /= 1000;
    unit++;
  }
  const digits = unit > 0 && value < 10 ? 1 : 0;
  const written = value.toLocaleString(undefined, {
    minimumFractionDigits: digits,
    maximumFractionDigits: digits,
  });
  return `${written} ${units[unit]}`;
}

/** A moment in the person's own way of writing dates. */
export function moment(at: string): string {
  return new Date(at).toLocaleString(undefined, { dateStyle: 'medium', timeStyle: 'short' });
}
