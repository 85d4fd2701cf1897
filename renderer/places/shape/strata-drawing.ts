import type { Strata } from '../../../main/api.ts';

/** Sizes in CSS pixels. */
export interface StrataLayout {
  readonly width: number;
  readonly bandHeight: number;
  /** From the top of one band to the top of the next. */
  readonly pitch: number;
  readonly labelWidth: number;
}

export interface StrataColours {
  readonly layers: readonly string[];
  readonly ink: string;
  readonly ground: string;
  readonly tick: string;
  readonly cursor: string;
}

/** A band's place on the canvas and the passages along it. */
interface BandPlace {
  readonly top: number;
  readonly left: number;
  readonly width: number;
  /** x of the start of each passage, and of the end of the last. */
  readonly edges: Float64Array;
}

const tickRoom = 4;

/** The layout for a number of bands in the room there is. */
export function layoutFor(width: number, bands: number, room: number): StrataLayout {
  const labelWidth = width < 700 ? 88 : 128;
  const pitch = Math.max(14, Math.min(30, Math.floor(room / Math.max(1, bands))));
  return { width, labelWidth, pitch, bandHeight: pitch - tickRoom - (pitch > 20 ? 2 : 1) };
}

export function heightOf(strata: Strata, layout: StrataLayout): number {
  return strata.bands.length * layout.pitch + 2;
}

/** Where each band lies: as long as its transcript has words, the longest over the whole width. */
export function placesOf(strata: Strata, layout: StrataLayout): BandPlace[] {
  const totals = strata.bands.map(({ from, passages }) => {
    let words = 0;
    for (let i = from; i < from + passages; i++) words += Math.max(1, strata.words[i]);
    return words;
  });
  const longest = Math.max(1, ...totals);
  const room = layout.width - layout.labelWidth;
  return strata.bands.map(({ from, passages }, band) => {
    const width = (totals[band] / longest) * room;
    const edges = new Float64Array(passages + 1);
    edges[0] = layout.labelWidth;
    let words = 0;
    for (let i = 0; i < passages; i++) {
      words += Math.max(1, strata.words[from + i]);
      edges[i + 1] = layout.labelWidth + (words / totals[band]) * width;
    }
    return { top: band * layout.pitch + 1, left: layout.labelWidth, width, edges };
  });
}

/**
 * Draws every band: all themes as quiet layers that add to one, the chosen one inked and lowest, so
 * that its height is its strength; gaps where an interviewer speaks; ticks under decided passages.
 */
export function drawStrata(
  context: CanvasRenderingContext2D,
  strata: Strata,
  layout: StrataLayout,
  chosen: number,
  colours: StrataColours,
): void {
  const places = placesOf(strata, layout);
  const order = strata.themes.map((_, index) => index).filter((index) => index !== chosen);
  if (chosen >= 0) order.unshift(chosen);
  const rank = new Map(order.filter((index) => index !== chosen).map((index, i) => [index, i]));
  strata.bands.forEach(({ from, passages }, band) => {
    if (passages === 0) return;
    const place = places[band];
    const columns = columnsOf(strata, from, place);
    const base = place.top + layout.bandHeight;
    const below = new Float64Array(columns.count);
    for (const theme of order) {
      const above = new Float64Array(columns.count);
      for (let c = 0; c < columns.count; c++) above[c] = below[c] + columns.share(c, theme);
      context.beginPath();
      context.moveTo(columns.x(0), base - below[0] * layout.bandHeight);
      for (let c = 0; c < columns.count; c++) {
        context.lineTo(columns.x(c), base - above[c] * layout.bandHeight);
      }
      for (let c = columns.count - 1; c >= 0; c--) {
        context.lineTo(columns.x(c), base - below[c] * layout.bandHeight);
      }
      context.closePath();
      context.fillStyle =
        theme === chosen
          ? colours.ink
          : colours.layers[(rank.get(theme) ?? 0) % colours.layers.length];
      context.fill();
      below.set(above);
    }
    context.fillStyle = colours.ground;
    for (let i = 1; i < passages; i++) {
      if (strata.gaps[from + i] === 1 && place.edges[i + 1] - place.edges[i] > 6) {
        context.fillRect(Math.round(place.edges[i]) - 1, place.top, 1.5, layout.bandHeight);
      }
    }
  });
  context.fillStyle = colours.tick;
  for (let t = 0; t < strata.ticks.length; t += 2) {
    if (strata.ticks[t + 1] !== chosen || chosen < 0) continue;
    const spot = spotOf(strata, places, strata.ticks[t]);
    if (spot !== null) {
      context.fillRect(Math.round(spot.x) - 2, spot.top + layout.bandHeight + 1, 4, 2.5);
    }
  }
}

/** Frames one passage's place, where the cursor is. */
export function drawCursor(
  context: CanvasRenderingContext2D,
  strata: Strata,
  layout: StrataLayout,
  passage: number,
  colours: StrataColours,
): void {
  const places = placesOf(strata, layout);
  const band = bandOf(strata, passage);
  if (band < 0) return;
  const { edges, top } = places[band];
  const index = passage - strata.bands[band].from;
  context.strokeStyle = colours.cursor;
  context.lineWidth = 2;
  context.strokeRect(
    edges[index],
    top - 0.5,
    Math.max(3, edges[index + 1] - edges[index]),
    layout.bandHeight + 1,
  );
}

/** The passage under a point, or -1. */
export function passageAt(strata: Strata, layout: StrataLayout, x: number, y: number): number {
  const band = Math.floor((y - 1) / layout.pitch);
  if (band < 0 || band >= strata.bands.length) return -1;
  const { edges } = placesOf(strata, layout)[band];
  if (x < edges[0] || x >= edges[edges.length - 1]) return -1;
  let low = 0;
  let high = edges.length - 2;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (edges[middle] <= x) low = middle;
    else high = middle - 1;
  }
  return strata.bands[band].from + low;
}

export function bandOf(strata: Strata, passage: number): number {
  return strata.bands.findIndex(
    ({ from, passages }) => passage >= from && passage < from + passages,
  );
}

/** The passage that an arrow key leads to. */
export function step(strata: Strata, passage: number, key: string): number {
  const band = bandOf(strata, passage);
  if (band < 0) return strata.bands.find(({ passages }) => passages > 0)?.from ?? -1;
  const { from, passages } = strata.bands[band];
  if (key === 'ArrowLeft') return Math.max(from, passage - 1);
  if (key === 'ArrowRight') return Math.min(from + passages - 1, passage + 1);
  if (key === 'Home') return from;
  if (key === 'End') return from + passages - 1;
  const next = strata.bands[key === 'ArrowUp' ? band - 1 : band + 1];
  if (next === undefined || next.passages === 0) return passage;
  const along = (passage - from) / Math.max(1, passages - 1);
  return next.from + Math.round(along * (next.passages - 1));
}

function spotOf(strata: Strata, places: readonly BandPlace[], passage: number) {
  const band = bandOf(strata, passage);
  if (band < 0) return null;
  const { edges, top } = places[band];
  const index = passage - strata.bands[band].from;
  return { x: (edges[index] + edges[index + 1]) / 2, top };
}

/**
 * The band in columns of a few pixels. Between the middles of two passages shares go over smoothly;
 * where passages are narrower than a column they are averaged by the words that fall into it.
 */
function columnsOf(strata: Strata, from: number, { left, width, edges }: BandPlace) {
  const themes = strata.themes.length;
  const count = Math.max(2, Math.ceil(width / 2.5) + 1);
  const passages = edges.length - 1;
  const values = new Float64Array(count * themes);
  const spacing = width / (count - 1);
  const middle = (i: number): number => (edges[i] + edges[i + 1]) / 2;
  let at = 0;
  for (let c = 0; c < count; c++) {
    const x = left + c * spacing;
    while (at < passages - 1 && middle(at + 1) <= x) at++;
    const after = Math.min(passages - 1, x < middle(at) ? at : at + 1);
    const span = middle(after) - middle(at);
    const t = span <= 0 ? 0 : Math.min(1, Math.max(0, (x - middle(at)) / span));
    const eased = t * t * (3 - 2 * t);
    for (let theme = 0; theme < themes; theme++) {
      const a = strata.shares[(from + at) * themes + theme];
      const b = strata.shares[(from + after) * themes + theme];
      values[c * themes + theme] = a + (b - a) * eased;
    }
  }
  return {
    count,
    x: (c: number): number => left + c * spacing,
    share: (c: number, theme: number): number => values[c * themes + theme],
  };
}
