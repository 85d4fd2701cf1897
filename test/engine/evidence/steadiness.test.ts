import { beforeAll, describe, expect, it } from 'vitest';
import { matchThemes, type Counts } from '../../../engine/model/index.ts';
import {
  fitAnew,
  floorOf,
  planSteadiness,
  refitWithout,
  runTask,
  shuffled,
  steadinessOf,
  steadinessResult,
  type Base,
  type Material,
  type Refit,
  type SteadinessResult,
} from '../../../engine/evidence/index.ts';
import { plantedCorpus } from '../model/planted.ts';
import { planted, told } from './spoken.ts';

const onward = (): boolean => true;

function measure(material: Material, resamples: number, seed = 1): SteadinessResult {
  const plan = planSteadiness(material, resamples, seed);
  if (!plan.ok) throw new Error(plan.code);
  const first = plan.first.map((task) => runTask(material, task, onward));
  const after = plan.shuffled(first.at(-1) as Float32Array);
  const second = plan.second.map((task) => runTask(after, task, onward));
  return steadinessResult(
    plan,
    seed,
    first[0] as Base,
    first.slice(1, -1) as Refit[],
    second[0] as Base,
    second.slice(1) as Refit[],
  );
}

describe('planted themes', () => {
  const material = told(planted, 12, 4);
  let result: SteadinessResult;
  beforeAll(() => {
    result = measure(material, 5);
  });

  it('are found again without some of the people, each with a cosine above .95', () => {
    for (const { cosine } of result.themes) expect(cosine).toBeGreaterThan(0.95);
  });

  it('keep nine in ten of the passages that they lead', () => {
    for (const { stayed, passages } of result.themes) {
      expect(passages).toBeGreaterThan(20);
      expect(stayed).toBeLessThanOrEqual(passages);
      expect(stayed / passages).toBeGreaterThan(0.9);
    }
  });

  it('lie above the floor in everything', () => {
    const { floor, themes, perplexity } = result;
    for (const { steadiness, coherence, stayed, passages } of themes) {
      expect(steadiness).toBeGreaterThan(floor.steadiness + 0.15);
      expect(coherence).toBeGreaterThan(floor.coherence);
      expect(stayed / passages).toBeGreaterThan(floor.stayed + 0.3);
    }
    expect(perplexity).toBeLessThan(floor.perplexity);
  });

  it('count every passage once, and every one needs four of five re-fits to have stayed', () => {
    expect(result.themes.reduce((sum, { passages }) => sum + passages, 0)).toBe(240);
    expect([result.refits, result.refitsAtLeast, result.people, result.leftOut]).toEqual([
      5, 4, 12, 2,
    ]);
  });

  it('give the same result again, as plain JSON', () => {
    expect(measure(material, 5)).toEqual(result);
    expect(JSON.parse(JSON.stringify(result))).toEqual(result);
  });
});

describe('shuffled words', () => {
  it('are no steadier than their floor, and few of their passages stay', () => {
    const chance = told({ ...planted, counts: shuffled(planted.counts, 77) }, 12, 4);
    const found = { ...chance, phi: fitAnew(chance)!.phi };
    const { themes, floor } = measure(found, 5);
    const mean = themes.reduce((sum, { steadiness }) => sum + steadiness, 0) / themes.length;
    expect(mean).toBeLessThan(floor.steadiness + 0.05);
    const stayed = themes.reduce((sum, theme) => sum + theme.stayed, 0);
    expect(stayed / 240).toBeLessThan(floor.stayed + 0.15);
  });
});

describe('a re-fit', () => {
  const material = told(planted, 12, 4);

  it('that leaves nobody out is the fit again: cosines of 1, and every passage where it was', () => {
    const fit = fitAnew(material)!;
    const again = { ...material, phi: fit.phi };
    const refit = refitWithout(again, [])!;
    for (const cosine of [...refit.cosines, ...refit.steadiness]) {
      expect(cosine).toBeCloseTo(1, 12);
    }
    const base = runTask(again, { kind: 'base' }, onward) as Base;
    expect(refit.leads).toEqual(base.leads);
    const { themes } = steadinessOf(base, [refit, refit]);
    for (const theme of themes) expect(theme.stayed).toBe(theme.passages);
  });

  it('does not hear those who are left out: other words from them change none of its themes', () => {
    const out = [3, 7];
    const other: Counts = { ...material.counts, indices: material.counts.indices.slice() };
    for (let d = 0; d < other.passages; d++) {
      if (!out.includes(material.people[d])) continue;
      const length = other.offsets[d + 1] - other.offsets[d];
      for (let i = 0; i < length; i++) other.indices[other.offsets[d] + i] = i;
    }
    const a = refitWithout(material, out)!;
    const b = refitWithout({ ...material, counts: other }, out)!;
    expect(b.cosines).toEqual(a.cosines);
    const heard = [...material.people.keys()].filter((d) => !out.includes(material.people[d]));
    expect(heard.map((d) => b.leads[d])).toEqual(heard.map((d) => a.leads[d]));
    expect(b.heldOut).not.toEqual(a.heldOut);
  });

  it('scores the words of those who are left out and of nobody else, about half of them', () => {
    const { heldOut } = refitWithout(material, [0, 5])!;
    expect(heldOut.words).toBeGreaterThan(40 * 40 * 0.45);
    expect(heldOut.words).toBeLessThan(40 * 40 * 0.55);
    expect(refitWithout(material, [])!.heldOut.words).toBe(0);
  });

  it('lets pins go, or a pinned theme would be steady by decree', () => {
    const foreign = new Float32Array(150).fill(1 / 150);
    const pinned = told(planted, 12, 4, { frozen: [{ theme: 0, phi: foreign }] });
    expect(refitWithout(pinned, [1])).toEqual(refitWithout(material, [1]));
  });

  it('keeps decisions on the passages of those who stay, on the right passages', () => {
    // Somebody confirms the theme that a passage is told by: it must lead it more strongly than before.
    const confirmed = [4, 5, 6].map((passage) => ({ passage, theme: 2, value: 200 }));
    const decided = told(planted, 12, 4, { passagePriors: confirmed });
    const without = refitWithout(decided, [4, 5, 6])!;
    // All three are told by people who are left out, so nothing of the decision is left.
    expect(without).toEqual(refitWithout(material, [4, 5, 6]));
    expect(refitWithout(decided, [1])).not.toEqual(refitWithout(material, [1]));
  });

  it('stops where it is told to', () => {
    expect(runTask(material, { kind: 'refit', out: [1] }, () => false)).toBe(null);
    expect(runTask(material, { kind: 'shuffled fit', seed: 1 }, () => false)).toBe(null);
    expect(runTask(material, { kind: 'base' }, () => false)).toBe(null);
  });
});

describe('steadinessOf', () => {
  const base: Base = { coherence: [0.3, 0.1], leads: Int32Array.of(0, 0, 1, -1, 1), strengths: [] };
  const refit = (leads: number[], steadiness: number[]): Refit => ({
    steadiness,
    cosines: steadiness.map(() => 0.5),
    leads: Int32Array.from(leads),

    heldOut: { total: -8 * Math.log(8), words: 8 },
  });
  const refits = [
    refit([0, 1, 1, -1, 1], [1, 0.5]),
    refit([0, 0, 1, -1, 0], [0.8, 0.5]),
    refit([0, 1, 1, -1, 1], [0.9, 0.5]),
    refit([0, 0, 1, -1, 1], [0.9, 0.9]),
    refit([1, 0, 1, -1, 0], [0.9, 0.1]),
  ];

  it('is the mean cosine, and the passages that stayed in four of five', () => {
    const { themes, refitsAtLeast } = steadinessOf(base, refits);
    expect(refitsAtLeast).toBe(4);
    expect(themes.map(({ steadiness }) => steadiness)).toEqual([
      expect.closeTo(0.9, 12),
      expect.closeTo(0.5, 12),
    ]);
    expect(themes.map(({ passages, stayed }) => [passages, stayed])).toEqual([
      [2, 1],
      [2, 1],
    ]);
  });

  it('has the perplexity V where every word is scored 1 / V', () => {
    const { perplexity, scoredWords } = steadinessOf(base, refits);
    expect(perplexity).toBeCloseTo(8, 10);
    expect(scoredWords).toBe(40);
  });

  it('knows as floors what nineteen in twenty stay below', () => {
    const floor = floorOf(
      { ...base, strengths: Array.from({ length: 100 }, (_, i) => i / 100) },
      refits,
    );
    expect(floor.strength).toBe(0.94);
    expect(floor.steadiness).toBeCloseTo(0.9, 12);
    expect(floor.coherence).toBe(0.3);
    expect(floor.stayed).toBe(0.5);
  });
});

describe('a plan', () => {
  it('is refused with too few people', () => {
    expect(planSteadiness(told(planted, 3, 4), 5, 1)).toEqual({
      ok: false,
      code: 'too few participants',
      people: 3,
      least: 4,
    });
    expect(planSteadiness(told(planted, 4, 4), 5, 1).ok).toBe(true);
  });

  it('is refused where a re-fit would have fewer passages than themes', () => {
    const small = told(plantedCorpus(10, 30, 4, 20, 1), 5, 9);
    expect(planSteadiness(small, 5, 1)).toEqual({
      ok: false,
      code: 'too many themes',
      themes: 9,
      passages: 8,
    });
  });
});

describe('planted themes found from scratch', () => {
  it('match what was planted with a cosine above .95 (Hungarian matching)', () => {
    const { cosines } = matchThemes(planted.phi, fitAnew(told(planted, 12, 4))!.phi, 150);
    for (const cosine of cosines) expect(cosine).toBeGreaterThan(0.95);
  });
});
