export { npmi, occurrences, umass, type Occurrences } from './coherence.ts';
export { cosine } from './cosine.ts';
export { hellinger, jensenShannon, totalVariation } from './distances.ts';
export { halves, heldOut, type HeldOut } from './held-out.ts';
export { matchThemes, type ThemeMatch } from './match-themes.ts';
export { matching } from './matching.ts';
export { normalisedMutualInformation, variationOfInformation } from './mutual-information.ts';
export { purity } from './purity.ts';
export { adjustedRand, rand } from './rand.ts';
