import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { fold, type Entry } from '../../engine/study/index.ts';
import { openStudyFile } from '../../main/project/index.ts';
import { upcast, upcasters, type Upcaster } from '../../main/upcast.ts';

/** Made up: what a second and a third version might have changed. */
const steps: readonly Upcaster[] = [
  {
    to: 2,
    intent: 'a rename says what it was before',
    bring: (stored) => ({ ...stored, edit: { from: '', ...(stored['edit'] as object) } }),
  },
  { to: 3, intent: 'who is by name', bring: ({ who, ...rest }) => ({ by: who, ...rest }) },
];

describe('a decision of an older version', () => {
  it('is brought through every later version, one after the other', () => {
    const old = { at: 'then', who: 'r', edit: { kind: 'studyRenamed', to: 'B' } };
    const now = { at: 'then', by: 'r', edit: { kind: 'studyRenamed', from: '', to: 'B' } };
    expect(upcast(old, steps)).toEqual({ ok: true, entry: now });
    const second = { version: 2, at: 'then', who: 'r', edit: now.edit };
    expect(upcast(second, steps)).toEqual({ ok: true, entry: now });
    expect(upcast({ version: 3, ...now }, steps)).toEqual({ ok: true, entry: now });
  });

  it('of a newer version, or of none that there is, is refused', () => {
    for (const version of [4, '2', null, {}]) {
      expect(upcast({ version }, steps)).toEqual({ ok: false, code: 'newer version' });
    }
    expect(upcast({ version: 2 })).toEqual({ ok: false, code: 'newer version' });
  });
});

describe('the steps between versions', () => {
  it('are numbered without gaps, and each says why', () => {
    expect(upcasters.map(({ to }) => to)).toEqual(upcasters.map((_, index) => index + 2));
    for (const { intent } of upcasters) expect(intent).toMatch(/\S+ \S+/u);
  });

  // One file of each version stays here for good.
  it.each([[1, '../golden/golden.understory']])('open a study of version %i', async (_, name) => {
    const at = fileURLToPath(new URL(name, import.meta.url));
    const opened = await openStudyFile(at, { readOnly: true });
    if (!opened.ok) throw new Error(opened.code);
    const entries = [...opened.value.edits()].map(({ sequence, json }): Entry => {
      const brought = upcast(json);
      if (!brought.ok) throw new Error(brought.code);
      return { ...brought.entry, sequence };
    });
    opened.value.close();
    expect(entries.length).toBeGreaterThan(10);
    const study = fold(entries);
    expect(study.ok && study.value.fits.size).toBeGreaterThan(0);
  });
});
