/**
 * The order of two texts by their UTF-16 code units: the same on every machine, which no order by
 * locale is. For `Array.prototype.sort`.
 */
export function compareCodeUnits(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}
