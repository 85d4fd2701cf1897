import type { Strata } from '../../../main/api.ts';

/** How the rows of the strata are put in order: 'attribute: …' for an attribute of that name. */
export type RowOrder = 'gathered' | 'name' | 'share' | `attribute: ${string}`;

/** The orders that a study has, in the words of a list to choose from. */
export function rowOrders(
  strata: Strata,
  chosen: number,
): readonly { readonly value: RowOrder; readonly label: string }[] {
  const names = new Set(strata.bands.flatMap(({ attributes }) => Object.keys(attributes)));
  return [
    { value: 'name', label: 'by name' },
    { value: 'gathered', label: 'as gathered' },
    ...(chosen < 0 ? [] : [{ value: 'share' as const, label: 'by share of the theme' }]),
    ...[...names].map((name) => ({ value: `attribute: ${name}` as const, label: `by ${name}` })),
  ];
}

/** Bands from top to bottom, as indices; what is equal stays in the order of names. */
export function inOrder(strata: Strata, order: RowOrder, chosen: number): readonly number[] {
  const { bands, bandShares, themes } = strata;
  const indices = bands.map((_, band) => band);
  if (order === 'gathered') return indices.sort((a, b) => bands[a].gathered - bands[b].gathered);
  if (order === 'share' && chosen >= 0) {
    const share = (band: number): number => bandShares[band * themes.length + chosen];
    return indices.sort((a, b) => share(b) - share(a) || a - b);
  }
  if (order.startsWith('attribute: ')) {
    const name = order.slice('attribute: '.length);
    const collator = new Intl.Collator(undefined, { numeric: true });
    return indices.sort((a, b) => {
      const [one, two] = [bands[a].attributes[name], bands[b].attributes[name]];
      // Whoever has no value comes last.
      if (one === undefined || two === undefined) {
        return Number(one === undefined) - Number(two === undefined) || a - b;
      }
      return collator.compare(one, two) || a - b;
    });
  }
  return indices;
}

/** The value that a row is ordered by, to be said beside it; empty for orders that show themselves. */
export function valueIn(strata: Strata, order: RowOrder, band: number): string {
  if (!order.startsWith('attribute: ')) return '';
  return strata.bands[band].attributes[order.slice('attribute: '.length)] ?? 'no value';
}
