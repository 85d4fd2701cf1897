import { readFileSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import type { IdentifierKind } from '../../../../engine/spans/index.ts';
import {
  findIdentifiers,
  scanText,
  turnsFromText,
  type Occurrence,
} from '../../../../engine/text/index.ts';
import { nameLists } from '../../../../main/name-lists.ts';

const kinds: Readonly<Record<string, IdentifierKind>> = {
  p: 'person',
  l: 'place',
  o: 'organisation',
  n: 'other name',
  e: 'e-mail',
  t: 'telephone',
  w: 'web',
  d: 'date',
  a: 'age',
  c: 'postcode',
  '#': 'number',
};

export interface Planted {
  readonly kind: IdentifierKind;
  readonly start: number;
  readonly end: number;
}

/** A text with `{p:Ruth}` around what is planted in it: the text without the marks, and the plants. */
export function planted(marked: string): { readonly text: string; readonly plants: Planted[] } {
  const plants: Planted[] = [];
  let text = '';
  let from = 0;
  for (const match of marked.matchAll(/\{([a-z#]):([^{}]+)\}/gu)) {
    text += marked.slice(from, match.index);
    plants.push({
      kind: kinds[match[1]!]!,
      start: text.length,
      end: text.length + match[2]!.length,
    });
    text += match[2]!;
    from = match.index + match[0].length;
  }
  return { text: text + marked.slice(from), plants };
}

/** The planted interview in a language, ISO 639-3. */
export function plantedInterview(language: string): ReturnType<typeof planted> {
  const file = new URL(`./planted/${language}.txt`, import.meta.url);
  return planted(readFileSync(fileURLToPath(file), 'utf8'));
}

export interface Score {
  /** Planted, and found in any stretch that covers all of it, whatever it was taken for. */
  readonly found: number;
  readonly planted: number;
  /** Claimed to be of the kind, and of them those that touch something planted of that kind. */
  readonly right: number;
  readonly claimed: number;
  readonly missed: readonly string[];
  readonly wrong: readonly string[];
}

export function search(text: string, language: string): Occurrence[] {
  const { turns } = turnsFromText(text);
  return findIdentifiers([scanText({ id: 't', text, turns, language })], nameLists());
}

/** How well a kind was found; labels in front of turns are neither planted nor counted against it. */
export function scoreOf(
  kind: IdentifierKind,
  { text, plants }: ReturnType<typeof planted>,
  found: readonly Occurrence[],
): Score {
  const { turns } = turnsFromText(text);
  const said = found.filter((one) =>
    turns.some((turn) => turn.start <= one.start && one.end <= turn.end),
  );
  const letters = (plant: Planted): boolean => {
    for (let at = plant.start; at < plant.end; at++) {
      if (!/[\p{L}\p{N}]/u.test(text.charAt(at))) continue;
      if (!said.some((one) => one.start <= at && at < one.end)) return false;
    }
    return true;
  };
  const wanted = plants.filter((plant) => plant.kind === kind);
  const missed = wanted.filter((plant) => !letters(plant));
  const claims = said.filter((one) => one.kind === kind);
  const wrong = claims.filter(
    (one) =>
      !plants.some(
        (plant) => plant.start < one.end && one.start < plant.end && plant.kind === kind,
      ),
  );
  return {
    found: wanted.length - missed.length,
    planted: wanted.length,
    right: claims.length - wrong.length,
    claimed: claims.length,
    missed: missed.map((plant) => text.slice(plant.start, plant.end)),
    wrong: wrong.map((one) => text.slice(one.start, one.end)),
  };
}
