/** A share in per cent, with a decimal where it is small. */
export function percent(share: number): string {
  const value = 100 * share;
  const digits = value > 0 && value < 10 ? 1 : 0;
  const text = value.toFixed(digits);
  return `${text.endsWith('.0') ? text.slice(0, -2) : text} %`;
}
