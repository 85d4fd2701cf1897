import { describe, expect, it } from 'vitest';
import { buildChild } from './child-process.ts';
import { torture } from './torture.ts';

// `npm run torture -- --rounds 200 --seed S` goes on for as long as anybody likes.
describe('a process killed at any moment', () => {
  it('loses nothing that it said is saved, in each of twenty rounds', async () => {
    const { script, remove } = await buildChild('torture-child');
    try {
      expect(await torture(script, { rounds: 20, seed: 20_261_201, longest: 80 })).toEqual([]);
    } finally {
      remove();
    }
  });
});
