/** Six decimals; empty for null. */
export function decimals(value: number | null): string {
  return value === null ? '' : value.toFixed(6);
}

/** HH:MM:SS.mmm; empty for null. Hours grow as needed. */
export function clock(milliseconds: number | null): string {
  if (milliseconds === null) return '';
  const two = (value: number): string => String(value).padStart(2, '0');
  const seconds = Math.floor(milliseconds / 1000);
  const rest = String(milliseconds % 1000).padStart(3, '0');
  return `${two(Math.floor(seconds / 3600))}:${two(Math.floor(seconds / 60) % 60)}:${two(seconds % 60)}.${rest}`;
}

/** "yes" or "no"; empty for null. */
export function yesNo(value: boolean | null): string {
  return value === null ? '' : value ? 'yes' : 'no';
}
