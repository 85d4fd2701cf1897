import type { SteadinessResult, ThemeEvidence } from '../../engine/evidence/index.ts';

/** How many of a theme's passages stayed with it. */
export function stayedSentence(
  { passages, stayed }: Pick<ThemeEvidence, 'passages' | 'stayed'>,
  { refits, refitsAtLeast }: Pick<SteadinessResult, 'refits' | 'refitsAtLeast'>,
): string {
  if (passages === 0) return 'It leads no passage by its words alone.';
  return `${stayed} of its ${passages} passages stayed in at least ${refitsAtLeast} of ${refits} re-fits.`;
}

/** How many themes are steadier than their floor. */
export function aboveFloorSentence(above: number, themes: number): string {
  return `${above} of ${themes} themes ${above === 1 ? 'is' : 'are'} steadier than the floor.`;
}

/** What the floor of strength says about the strength from which themes are suggested. */
export function strengthFloorSentence(floor: number, threshold: number): string {
  const two = (value: number): string => value.toFixed(2);
  return floor > threshold
    ? `Shuffled words reach a strength of ${two(floor)}, and themes are suggested from ${two(threshold)} on: ` +
        'a suggestion below the floor says where to look, and reading decides.'
    : `Shuffled words reach a strength of ${two(floor)}, below the ${two(threshold)} from which themes are suggested.`;
}
