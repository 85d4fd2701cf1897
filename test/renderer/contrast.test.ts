import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, test } from 'vitest';

// WCAG 2.2 (W3C Recommendation, 2023): 1.4.3 asks 4.5 : 1 for text, 1.4.11 asks 3 : 1 for what
// identifies a control or carries meaning. Relative luminance as defined there.
const css = readFileSync(
  join(import.meta.dirname, '..', '..', 'renderer', 'look', 'tokens.css'),
  'utf8',
);
const [lightPart, darkPart] = css.split('@media (prefers-color-scheme: dark)');

function colours(part: string): ReadonlyMap<string, string> {
  return new Map(
    [...part.matchAll(/--([\w-]+):\s*(#[0-9a-f]{6});/gu)].map(([, name, value]) => [name, value]),
  );
}

function luminance(colour: string): number {
  const [red, green, blue] = [1, 3, 5]
    .map((at) => Number.parseInt(colour.slice(at, at + 2), 16) / 255)
    .map((value) => (value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4));
  return 0.2126 * red + 0.7152 * green + 0.0722 * blue;
}

function contrast(a: string, b: string): number {
  const [high, low] = [luminance(a), luminance(b)].sort((x, y) => y - x);
  return (high + 0.05) / (low + 0.05);
}

test('the formula gives 21 for black on white and 1 for a colour on itself', () => {
  expect(contrast('#000000', '#ffffff')).toBeCloseTo(21, 10);
  expect(contrast('#2f5d46', '#2f5d46')).toBe(1);
});

const grounds = ['paper', 'sheet', 'moss-wash', 'bark-wash', 'berry-wash', 'line-soft'];
const texts = ['ink', 'ink-2', 'ink-3'];

describe.each([
  ['light', colours(lightPart)],
  ['dark', new Map([...colours(lightPart), ...colours(darkPart)])],
])('%s', (_, all) => {
  const get = (name: string): string => {
    const colour = all.get(name);
    if (colour === undefined) throw new Error(`contrast: there is no colour ${name}`);
    return colour;
  };

  test.each(texts.flatMap((text) => grounds.map((ground) => [text, ground])))(
    'text in %s on %s reaches 4.5 : 1',
    (text, ground) => {
      expect(contrast(get(text), get(ground))).toBeGreaterThanOrEqual(4.5);
    },
  );

  test.each([
    ['moss', 'paper'],
    ['moss', 'sheet'],
    ['moss', 'moss-wash'],
    ['bark', 'paper'],
    ['bark', 'bark-wash'],
    ['berry', 'sheet'],
    ['berry', 'paper'],
    ['on-moss', 'moss'],
    ['on-moss', 'moss-strong'],
  ])('words in %s on %s reach 4.5 : 1', (text, ground) => {
    expect(contrast(get(text), get(ground))).toBeGreaterThanOrEqual(4.5);
  });

  test.each([
    ['line-strong', 'paper'],
    ['line-strong', 'sheet'],
    ['moss', 'layer-1'],
    ['moss', 'layer-2'],
    ['moss', 'layer-3'],
    ['bark-line', 'paper'],
  ])('lines and layers in %s on %s reach 3 : 1', (line, ground) => {
    expect(contrast(get(line), get(ground))).toBeGreaterThanOrEqual(3);
  });
});
