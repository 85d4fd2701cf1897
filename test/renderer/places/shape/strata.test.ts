import { describe, expect, test } from 'vitest';
import type { Strata } from '../../../../main/api.ts';
import {
  bandOf,
  layoutFor,
  StrataPicture,
} from '../../../../renderer/places/shape/strata-drawing.ts';
import { inOrder, rowOrders, valueIn } from '../../../../renderer/places/shape/strata-rows.ts';
import { shapesOf } from '../../../../renderer/places/shape/svg-to-png.ts';

/** Three transcripts of 4, 0 and 2 passages, ten words each, with two themes. */
const strata: Strata = {
  bands: [
    band('P1', 0, 4, { island: 'Nes', age: '10' }, 2),
    band('P2', 4, 0, {}, 0),
    band('P3', 4, 2, { island: 'Holm', age: '9' }, 1),
  ],
  themes: ['sea', 'school'],
  words: new Int32Array(6).fill(10),
  gaps: new Int32Array(6),
  places: Int32Array.from({ length: 12 }, (_, i) => i),
  shares: Float32Array.from([1, 0, 1, 0, 0, 1, 0, 1, 0.5, 0.5, 0.5, 0.5]),
  bandShares: Float32Array.from([0.5, 0.5, 0, 0, 0.75, 0.25]),
  ticks: Int32Array.from([0, 0]),
};

function band(
  name: string,
  from: number,
  passages: number,
  attributes: Record<string, string>,
  gathered: number,
): Strata['bands'][number] {
  return { transcript: name, name, participant: name, attributes, gathered, from, passages };
}

const layout = layoutFor(528, 3, 90);
const picture = new StrataPicture(strata, layout, [2, 1, 0]);

describe('the strata on a screen', () => {
  test('give each line the room there is, within what can be seen and read', () => {
    expect(layout).toMatchObject({ pitch: 30, labelWidth: 88 });
    expect(layoutFor(1000, 120, 300).pitch).toBe(14);
    expect(picture.height).toBe(92);
  });

  test('know which lines a stretch touches', () => {
    expect(picture.linesIn(0, 30)).toEqual({ first: 0, last: 1 });
    expect(picture.linesIn(20, 62)).toEqual({ first: 0, last: 3 });
    expect(picture.linesIn(0, 10_000)).toEqual({ first: 0, last: 3 });
  });

  test('find the passage under a point, in the order of the lines', () => {
    // The longest band is 440 wide: 110 a passage.
    expect(picture.passageAt(88, 70)).toBe(0);
    expect(picture.passageAt(88 + 111, 70)).toBe(1);
    expect(picture.passageAt(88 + 111, 10)).toBe(5);
    expect(picture.passageAt(88 + 221, 10)).toBe(-1);
    expect(picture.passageAt(40, 70)).toBe(-1);
    expect(picture.passageAt(100, 40)).toBe(-1);
    expect(picture.passageAt(100, 400)).toBe(-1);
  });

  test('are walked by keys, past transcripts without a passage', () => {
    expect(picture.step(-1, 'ArrowDown')).toBe(4);
    expect(picture.step(4, 'ArrowRight')).toBe(5);
    expect(picture.step(5, 'ArrowRight')).toBe(5);
    expect(picture.step(5, 'ArrowDown')).toBe(3);
    expect(picture.step(3, 'ArrowDown')).toBe(3);
    expect(picture.step(3, 'Home')).toBe(0);
    expect(picture.step(0, 'End')).toBe(3);
    expect(picture.step(0, 'ArrowUp')).toBe(4);
    expect(picture.step(4, 'ArrowUp')).toBe(4);
  });

  test('tell which band a passage lies in', () => {
    expect([0, 3, 4, 5, 6, -1].map((passage) => bandOf(strata, passage))).toEqual([
      0, 0, 2, 2, -1, -1,
    ]);
  });
});

describe('the rows of the strata', () => {
  test('stand by name, as gathered, by the share of a theme, or by an attribute', () => {
    expect(inOrder(strata, 'name', 0)).toEqual([0, 1, 2]);
    expect(inOrder(strata, 'gathered', 0)).toEqual([1, 2, 0]);
    expect(inOrder(strata, 'share', 0)).toEqual([2, 0, 1]);
    expect(inOrder(strata, 'attribute: island', 0)).toEqual([2, 0, 1]);
    // Numbers by their size, and nobody's value last.
    expect(inOrder(strata, 'attribute: age', -1)).toEqual([2, 0, 1]);
    expect(valueIn(strata, 'attribute: age', 1)).toBe('no value');
    expect(valueIn(strata, 'name', 1)).toBe('');
  });

  test('offer the share of a theme only where one is inked', () => {
    const values = (chosen: number) => rowOrders(strata, chosen).map(({ value }) => value);
    expect(values(0)).toContain('share');
    expect(values(-1)).toEqual(['name', 'gathered', 'attribute: island', 'attribute: age']);
  });
});

test('a drawing is read shape by shape', () => {
  expect(
    shapesOf(
      '<svg><title>x</title><rect x="1" y="2"/><path fill="#fff" d="M0 0Z"/><text x="3">a &lt;b&gt; &amp;amp;</text></svg>',
    ),
  ).toEqual([
    { name: 'rect', attributes: { x: '1', y: '2' }, text: '' },
    { name: 'path', attributes: { fill: '#fff', d: 'M0 0Z' }, text: '' },
    { name: 'text', attributes: { x: '3' }, text: 'a <b> &amp;' },
  ]);
});
