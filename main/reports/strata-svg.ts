import type { Strata } from '../api.ts';

export interface StrataFigure {
  /** Bands from top to bottom, as indices. */
  readonly order: readonly number[];
  /** The inked layer, or -1. */
  readonly chosen: number;
  readonly label: string | null;
  readonly study: string;
}

const ink = '#2f5d46';
const text = '#23302a';
const quiet = '#58635c';
const greys = ['#d9d6cc', '#e4e1d8', '#c9c6bb'];
const width = 1200;
const left = 190;
const top = 104;
const pitch = 26;
const height = 18;
/** Above this many corners the other layers are drawn as one, so that the file stays small. */
const mostCorners = 150_000;

/**
 * The strata as SVG 1.1: a band a transcript, as long as it has words, its layers adding up to one,
 * the inked one lowest so that its height is its strength; a tick under what a person coded with it.
 * Only paths, rectangles and texts, with attributes for everything.
 */
export function strataSvg(strata: Strata, { order, chosen, label, study }: StrataFigure): string {
  const lengths = order.map((band) => lengthOf(strata, band));
  const longest = Math.max(1, ...lengths);
  const corners = 2 * strata.words.length * strata.themes.length;
  const others = strata.themes.map((_, theme) => theme).filter((theme) => theme !== chosen);
  const layers = [
    ...(chosen < 0 ? [] : [[chosen]]),
    ...(corners > mostCorners ? [others] : others.map((theme) => [theme])),
  ].filter((layer) => layer.length > 0);
  const parts: string[] = [];
  order.forEach((band, line) => {
    const { name, from, passages } = strata.bands[band];
    const y = top + line * pitch;
    parts.push(written(left - 14, y + height - 4, 13, text, shortened(name, 26), 'end'));
    if (passages === 0) return;
    const room = ((width - left - 20) * lengths[line]) / longest;
    const middles = middlesOf(strata, band, room, lengths[line]);
    const below = new Float64Array(passages);
    layers.forEach((layer, index) => {
      const above = below.map(
        (base, i) =>
          base +
          layer.reduce(
            (sum, theme) => sum + strata.shares[(from + i) * strata.themes.length + theme],
            0,
          ),
      );
      const colour =
        layer[0] === chosen ? ink : greys[(chosen < 0 ? index : index - 1) % greys.length];
      parts.push(`<path fill="${colour}" d="${outline(middles, room, y, below, above)}"/>`);
      below.set(above);
    });
    for (const passage of ticksIn(strata, band, chosen)) {
      const x = left + middles[passage - from];
      parts.push(
        `<rect x="${short(x - 2)}" y="${y + height + 2}" width="4" height="3" fill="${text}"/>`,
      );
    }
  });
  const bottom = top + order.length * pitch + 24;
  const inked =
    label === null
      ? 'No theme is inked.'
      : chosen < 0
        ? `${label} has no layer in this fit.`
        : `Inked: ${label}. Its height is its share of a passage’s counted words; ticks stand under passages that a person coded with it.`;
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    `<svg xmlns="http://www.w3.org/2000/svg" width="${width}" height="${bottom}" viewBox="0 0 ${width} ${bottom}">`,
    `<title>${escaped(`Strata of ${study}`)}</title>`,
    `<desc>${escaped(`A band a transcript, from first word to last. ${inked}`)}</desc>`,
    `<rect x="0" y="0" width="${width}" height="${bottom}" fill="#fdfcf9"/>`,
    written(20, 34, 20, text, shortened(`Strata of ${study}`, 90)),
    written(
      20,
      58,
      13,
      quiet,
      'A band a transcript, from first word to last, as long as it has words.',
    ),
    written(20, 76, 13, quiet, shortened(inked, 175)),
    ...parts,
    '</svg>',
    '',
  ].join('\n');
}

function lengthOf({ bands, words }: Strata, band: number): number {
  const { from, passages } = bands[band];
  let length = 0;
  for (let i = from; i < from + passages; i++) length += Math.max(1, words[i]);
  return length;
}

/** x of the middle of each passage, from the start of its band. */
function middlesOf({ bands, words }: Strata, band: number, room: number, length: number): number[] {
  const { from, passages } = bands[band];
  let before = 0;
  return Array.from({ length: passages }, (_, i) => {
    const own = Math.max(1, words[from + i]);
    before += own;
    return ((before - own / 2) / length) * room;
  });
}

function outline(
  middles: readonly number[],
  room: number,
  y: number,
  below: Float64Array,
  above: Float64Array,
): string {
  const xs = [0, ...middles, room];
  const at = (values: Float64Array, i: number): number =>
    values[Math.min(values.length - 1, Math.max(0, i - 1))];
  const corner = (values: Float64Array) => (x: number, i: number) =>
    `${short(left + x)} ${short(y + height * (1 - at(values, i)))}`;
  const forth = xs.map(corner(above));
  const back = xs.map(corner(below)).reverse();
  return `M${forth.join('L')}L${back.join('L')}Z`;
}

function ticksIn({ bands, ticks }: Strata, band: number, chosen: number): number[] {
  const { from, passages } = bands[band];
  const found = new Set<number>();
  for (let t = 0; t < ticks.length; t += 2) {
    const passage = ticks[t];
    if (chosen >= 0 && ticks[t + 1] === chosen && passage >= from && passage < from + passages) {
      found.add(passage);
    }
  }
  return [...found];
}

function written(
  x: number,
  y: number,
  size: number,
  colour: string,
  words: string,
  anchor: 'start' | 'end' = 'start',
): string {
  return `<text x="${x}" y="${y}" font-size="${size}" fill="${colour}" text-anchor="${anchor}" font-family="'Atkinson Hyperlegible Next', 'Helvetica Neue', Arial, sans-serif">${escaped(words)}</text>`;
}

function shortened(words: string, most: number): string {
  const letters = [...words];
  return letters.length <= most ? words : `${letters.slice(0, most - 1).join('')}…`;
}

function short(value: number): string {
  return String(Math.round(value * 10) / 10);
}

function escaped(words: string): string {
  return words
    .replaceAll('&', '&amp;')
    .replaceAll('<', '&lt;')
    .replaceAll('>', '&gt;')
    .replaceAll('"', '&quot;');
}
