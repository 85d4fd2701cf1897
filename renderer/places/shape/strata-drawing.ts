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

/** A band's place along its line. */
interface BandPlace {
  readonly width: number;
  /** x of the start of each passage, and of the end of the last. */
  readonly edges: Float64Array;
}

/** The shares of a band in columns of a few pixels, columns x themes. */
interface Columns {
  readonly count: number;
  readonly spacing: number;
  readonly values: Float32Array;
}

const tickRoom = 4;
const leastPitch = 14;
const mostPitch = 30;

/** The layout for a number of bands in the room there is. */
export function layoutFor(width: number, bands: number, room: number): StrataLayout {
  const labelWidth = width < 700 ? 88 : 128;
  const fitting = Math.floor(room / Math.max(1, bands));
  const pitch = Math.max(leastPitch, Math.min(mostPitch, fitting));
  return { width, labelWidth, pitch, bandHeight: pitch - tickRoom - (pitch > 20 ? 2 : 1) };
}

/**
 * The strata at one size and in one order of bands. What a band needs to be drawn is worked out when
 * it first comes into sight, and kept; only lines in sight are ever drawn.
 */
export class StrataPicture {
  readonly strata: Strata;
  readonly layout: StrataLayout;
  /** Bands from top to bottom, as indices. */
  readonly order: readonly number[];
  readonly #longest: number;
  readonly #totals: readonly number[];
  readonly #lineOf: Int32Array;
  readonly #places = new Map<number, BandPlace>();
  readonly #columns = new Map<number, Columns>();
  readonly #ticks = new Map<number, Map<number, number[]>>();
  /** Bands as they were drawn last, for one inked theme. */
  readonly #images = new Map<number, ImageData>();
  #imagesFor = '';

  constructor(strata: Strata, layout: StrataLayout, order: readonly number[]) {
    this.strata = strata;
    this.layout = layout;
    this.order = order;
    this.#totals = strata.bands.map(({ from, passages }) => {
      let words = 0;
      for (let i = from; i < from + passages; i++) words += Math.max(1, strata.words[i]);
      return words;
    });
    this.#longest = Math.max(1, ...this.#totals);
    this.#lineOf = new Int32Array(strata.bands.length).fill(-1);
    order.forEach((band, line) => (this.#lineOf[band] = line));
    for (let t = 0; t < strata.ticks.length; t += 2) {
      const band = bandOf(strata, strata.ticks[t]);
      const own = this.#ticks.get(band) ?? new Map<number, number[]>();
      this.#ticks.set(band, own);
      const theme = own.get(strata.ticks[t + 1]) ?? [];
      own.set(strata.ticks[t + 1], theme);
      theme.push(strata.ticks[t]);
    }
  }

  get height(): number {
    return this.order.length * this.layout.pitch + 2;
  }

  /** The lines that a stretch from one y to another touches: first and after the last. */
  linesIn(top: number, bottom: number): { readonly first: number; readonly last: number } {
    const { pitch } = this.layout;
    return {
      first: Math.max(0, Math.floor((top - 1) / pitch)),
      last: Math.min(this.order.length, Math.ceil((bottom - 1) / pitch)),
    };
  }

  /**
   * Draws lines in sight, from one on, until the time is up (at least one): all themes as quiet layers
   * that add to one, the chosen one inked and lowest, so that its height is its strength; gaps where
   * an interviewer speaks; ticks under decided passages. Gives the line to go on with. The context's
   * origin is the top of the stretch in sight.
   */
  draw(
    context: CanvasRenderingContext2D,
    { top, bottom }: { readonly top: number; readonly bottom: number },
    chosen: number,
    colours: StrataColours,
    { from: start, until }: { readonly from: number; readonly until: number },
  ): number {
    const { strata, layout } = this;
    const { first, last } = this.linesIn(top, bottom);
    let line = Math.max(first, start);
    do {
      const band = this.order[line];
      if (line >= last || band === undefined) return last;
      const { from, passages } = strata.bands[band];
      if (passages > 0) {
        const y = line * layout.pitch + 1 - top;
        this.#drawLayers(context, band, y, chosen, colours);
        const { edges } = this.#placeOf(band);
        context.fillStyle = colours.ground;
        for (let i = 1; i < passages; i++) {
          if (strata.gaps[from + i] === 1 && edges[i + 1] - edges[i] > 6) {
            context.fillRect(Math.round(edges[i]) - 1, y, 1.5, layout.bandHeight);
          }
        }
        context.fillStyle = colours.tick;
        for (const passage of chosen < 0 ? [] : (this.#ticks.get(band)?.get(chosen) ?? [])) {
          const i = passage - from;
          const x = Math.round((edges[i] + edges[i + 1]) / 2);
          context.fillRect(x - 2, y + layout.bandHeight + 1, 4, 2.5);
        }
      }
      line++;
    } while (performance.now() < until);
    return line;
  }

  #drawLayers(
    context: CanvasRenderingContext2D,
    band: number,
    y: number,
    chosen: number,
    colours: StrataColours,
  ): void {
    const ratio = context.getTransform().a;
    const key = `${chosen} ${ratio} ${colours.ink}`;
    if (key !== this.#imagesFor) {
      this.#images.clear();
      this.#imagesFor = key;
    }
    let image = this.#images.get(band);
    if (image === undefined) {
      image = this.#imageOf(context, band, chosen, colours, ratio);
      this.#images.set(band, image);
    }
    const { labelWidth } = this.layout;
    context.putImageData(image, Math.round(labelWidth * ratio), Math.round(y * ratio));
  }

  /**
   * The layers of a band, pixel by pixel: with many themes and no help from a graphics card, outlines
   * to fill take ten times as long.
   */
  #imageOf(
    context: CanvasRenderingContext2D,
    band: number,
    chosen: number,
    colours: StrataColours,
    ratio: number,
  ): ImageData {
    const { count, spacing, values } = this.#columnsOf(band);
    const themes = this.strata.themes.length;
    const high = Math.max(1, Math.round(this.layout.bandHeight * ratio));
    const wide = Math.max(1, Math.round(count * spacing * ratio));
    const image = context.createImageData(wide, high);
    const { data } = image;
    const { layers, rgb } = paints(themes, chosen, colours);
    const column = new Float32Array(4 * high);
    for (let x = 0; x < wide; x++) {
      column.fill(0);
      const at = Math.min(count - 1, Math.max(0, (x + 0.5) / ratio / spacing - 0.5));
      const one = Math.floor(at);
      const two = Math.min(count - 1, one + 1);
      const t = at - one;
      let base = 0;
      for (let rank = 0; rank < themes; rank++) {
        const theme = layers[rank];
        const share = values[one * themes + theme] * (1 - t) + values[two * themes + theme] * t;
        if (share <= 0) continue;
        const top = Math.min(high, base + share * high);
        for (let row = Math.floor(base); row < top; row++) {
          const part = Math.min(row + 1, top) - Math.max(row, base);
          const cell = 4 * (high - 1 - row);
          column[cell] += rgb[3 * rank] * part;
          column[cell + 1] += rgb[3 * rank + 1] * part;
          column[cell + 2] += rgb[3 * rank + 2] * part;
          column[cell + 3] += part;
        }
        base = top;
      }
      for (let row = 0; row < high; row++) {
        const part = column[4 * row + 3];
        if (part <= 0) continue;
        const pixel = 4 * (row * wide + x);
        data[pixel] = column[4 * row] / part;
        data[pixel + 1] = column[4 * row + 1] / part;
        data[pixel + 2] = column[4 * row + 2] / part;
        data[pixel + 3] = 255 * part;
      }
    }
    return image;
  }

  /** Frames one passage's place, where the cursor is. */
  drawCursor(
    context: CanvasRenderingContext2D,
    top: number,
    passage: number,
    colours: StrataColours,
  ): void {
    const spot = this.spotOf(passage);
    if (spot === null) return;
    context.strokeStyle = colours.cursor;
    context.lineWidth = 2;
    context.strokeRect(spot.x, spot.y - top - 0.5, spot.width, this.layout.bandHeight + 1);
  }

  /** Where a passage lies, or null for none. */
  spotOf(
    passage: number,
  ): { readonly x: number; readonly y: number; readonly width: number } | null {
    const band = bandOf(this.strata, passage);
    if (band < 0 || this.#lineOf[band] < 0) return null;
    const { edges } = this.#placeOf(band);
    const index = passage - this.strata.bands[band].from;
    return {
      x: edges[index],
      y: this.#lineOf[band] * this.layout.pitch + 1,
      width: Math.max(3, edges[index + 1] - edges[index]),
    };
  }

  /** The passage under a point, or -1. */
  passageAt(x: number, y: number): number {
    const line = Math.floor((y - 1) / this.layout.pitch);
    if (line < 0 || line >= this.order.length) return -1;
    const band = this.order[line];
    const { edges } = this.#placeOf(band);
    if (x < edges[0] || x >= edges[edges.length - 1]) return -1;
    let low = 0;
    let high = edges.length - 2;
    while (low < high) {
      const middle = (low + high + 1) >> 1;
      if (edges[middle] <= x) low = middle;
      else high = middle - 1;
    }
    return this.strata.bands[band].from + low;
  }

  /** The passage that an arrow key leads to. */
  step(passage: number, key: string): number {
    const { bands } = this.strata;
    const band = bandOf(this.strata, passage);
    if (band < 0) {
      const start = this.order.find((each) => bands[each].passages > 0);
      return start === undefined ? -1 : bands[start].from;
    }
    const { from, passages } = bands[band];
    if (key === 'ArrowLeft') return Math.max(from, passage - 1);
    if (key === 'ArrowRight') return Math.min(from + passages - 1, passage + 1);
    if (key === 'Home') return from;
    if (key === 'End') return from + passages - 1;
    const by = key === 'ArrowUp' ? -1 : 1;
    let line = this.#lineOf[band] + by;
    while (bands[this.order[line]]?.passages === 0) line += by;
    const next = bands[this.order[line]];
    if (next === undefined) return passage;
    const along = (passage - from) / Math.max(1, passages - 1);
    return next.from + Math.round(along * (next.passages - 1));
  }

  /** As long as its transcript has words, the longest over the whole width. */
  #placeOf(band: number): BandPlace {
    const known = this.#places.get(band);
    if (known !== undefined) return known;
    const { strata, layout } = this;
    const { from, passages } = strata.bands[band];
    const width = (this.#totals[band] / this.#longest) * (layout.width - layout.labelWidth);
    const edges = new Float64Array(passages + 1);
    edges[0] = layout.labelWidth;
    let words = 0;
    for (let i = 0; i < passages; i++) {
      words += Math.max(1, strata.words[from + i]);
      edges[i + 1] = layout.labelWidth + (words / this.#totals[band]) * width;
    }
    const place = { width, edges };
    this.#places.set(band, place);
    return place;
  }

  /**
   * Between the middles of two passages shares go over smoothly; where passages are narrower than a
   * column, the one at its start stands for it.
   */
  #columnsOf(band: number): Columns {
    const known = this.#columns.get(band);
    if (known !== undefined) return known;
    const { shares, themes: ids, bands } = this.strata;
    const { width, edges } = this.#placeOf(band);
    const { from } = bands[band];
    const themes = ids.length;
    const passages = edges.length - 1;
    const left = edges[0];
    const count = Math.max(1, Math.ceil(width / 2.5));
    const spacing = width / count;
    const values = new Float32Array(count * themes);
    const middle = (i: number): number => (edges[i] + edges[i + 1]) / 2;
    let at = 0;
    for (let c = 0; c < count; c++) {
      const x = left + (c + 0.5) * spacing;
      while (at < passages - 1 && middle(at + 1) <= x) at++;
      const after = Math.min(passages - 1, x < middle(at) ? at : at + 1);
      const span = middle(after) - middle(at);
      const t = span <= 0 ? 0 : Math.min(1, Math.max(0, (x - middle(at)) / span));
      const eased = t * t * (3 - 2 * t);
      const one = (from + at) * themes;
      const two = (from + after) * themes;
      for (let k = 0; k < themes; k++) {
        values[c * themes + k] = shares[one + k] + (shares[two + k] - shares[one + k]) * eased;
      }
    }
    const columns = { count, spacing, values };
    this.#columns.set(band, columns);
    return columns;
  }
}

/** The band that a passage lies in, or -1. */
export function bandOf({ bands }: Strata, passage: number): number {
  if (passage < 0) return -1;
  let low = 0;
  let high = bands.length - 1;
  while (low < high) {
    const middle = (low + high + 1) >> 1;
    if (bands[middle].from <= passage) low = middle;
    else high = middle - 1;
  }
  const band = bands[low];
  return band !== undefined && passage >= band.from && passage < band.from + band.passages
    ? low
    : -1;
}

/** The layers from the lowest up, and red, green and blue of each. */
function paints(themes: number, chosen: number, colours: StrataColours) {
  const layers = Int32Array.from({ length: themes }, (_, rank) =>
    chosen < 0 ? rank : rank === 0 ? chosen : rank <= chosen ? rank - 1 : rank,
  );
  const rgb = new Float32Array(3 * themes);
  layers.forEach((theme, rank) => {
    const grey = chosen >= 0 ? rank - 1 : rank;
    const colour = theme === chosen ? colours.ink : colours.layers[grey % colours.layers.length];
    rgb.set(channels(colour), 3 * rank);
  });
  return { layers, rgb };
}

/** Red, green and blue of a colour written as #rrggbb. */
function channels(colour: string): readonly [number, number, number] {
  const value = Number.parseInt(colour.slice(1), 16);
  return [(value >> 16) & 255, (value >> 8) & 255, value & 255];
}
