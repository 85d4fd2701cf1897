import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  isModelled,
  themesWithDecisions,
  type Edit,
  type Study,
} from '../../engine/study/index.ts';
import { decisions, fitStudy, rowOf } from '../../engine/themes/index.ts';
import { belongsTo } from '../../engine/spans/index.ts';
import type { Desk } from '../../main/desk.ts';
import { fit, type FitKind } from '../../main/fitting.ts';
import { recordSplit, trySplit } from '../../main/splitting.ts';
import { wordLists } from '../../main/word-lists.ts';
import { topics } from './commands/material.ts';
import { askedFor, codingOn, talkingDesk } from './fitted-desk.ts';

const said = Object.values(topics).flatMap((words) => words.split(' '));

/** In this thread: a worker takes longer to begin than such a fit to be made. */
const run = async (job: Parameters<typeof fitStudy>[0]) => fitStudy(job);

type Step = {
  readonly does:
    | 'name'
    | 'seed'
    | 'shut out'
    | 'pin'
    | 'confirm'
    | 'reject'
    | 'none'
    | 'merge'
    | 'aside or back'
    | 'ask for'
    | 'memo'
    | 'undo'
    | 'redo'
    | 're-fit'
    | 'from scratch'
    | 'refinement'
    | 'split';
  readonly a: number;
  readonly b: number;
};

const steps = fc.array(
  fc.record<Step>({
    does: fc.oneof(
      { weight: 4, arbitrary: fc.constant('re-fit' as const) },
      { weight: 1, arbitrary: fc.constantFrom('from scratch' as const, 'refinement' as const) },
      {
        weight: 14,
        arbitrary: fc.constantFrom<Step['does'][]>(
          'name',
          'seed',
          'shut out',
          'pin',
          'confirm',
          'confirm',
          'reject',
          'none',
          'merge',
          'aside or back',
          'aside or back',
          'ask for',
          'memo',
          'undo',
          'undo',
          'redo',
          'split',
        ),
      },
    ),
    a: fc.nat(40),
    b: fc.nat(200),
  }),
  { minLength: 10, maxLength: 22, size: 'max' },
);

/** Everything that a person decided, as one value; candidates that nobody touched are left out. */
function decided(study: Study): object {
  const themes = [...study.themes.values()].filter(
    ({ origin, name, pinned, seeds, shutOut, setAside, mergedInto }) =>
      origin !== 'fitted' ||
      name !== null ||
      pinned ||
      setAside ||
      mergedInto !== null ||
      seeds.length + shutOut.length > 0,
  );
  const inOrder = <One extends { readonly id: string }>(all: Iterable<One>): One[] =>
    [...all].sort((a, b) => (a.id < b.id ? -1 : 1));
  return {
    themes: inOrder(themes),
    codings: inOrder([...study.codings.values()].flatMap((byId) => [...byId.values()])),
    nones: inOrder([...study.nones.values()].flatMap((byId) => [...byId.values()])),
    memos: inOrder(study.memos.values()),
  };
}

class Walk {
  readonly desk: Desk;
  readonly undone: object[] = [];
  readonly done: object[] = [];
  fits = 0;

  constructor(desk: Desk) {
    this.desk = desk;
  }

  async take({ does, a, b }: Step): Promise<void> {
    const { desk } = this;
    const before = decided(desk.study);
    if (does === 'undo' || does === 'redo') {
      const made = desk[does]();
      if (made === null) return;
      if (!made.ok) throw new Error(`${does} was refused: ${made.code}`);
      const expected = (does === 'undo' ? this.done : this.undone).pop();
      expect(decided(desk.study)).toEqual(expected);
      (does === 'undo' ? this.undone : this.done).push(before);
      return;
    }
    const sequence = desk.study.sequence;
    if (does === 're-fit' || does === 'from scratch' || does === 'refinement') {
      await this.#fit(does);
    } else if (does === 'split') await this.#split(a);
    else {
      const edit = this.#edit(does, a, b);
      if (edit !== null) desk.make([{ edit }], { group: desk.context.mintId('group') });
    }
    if (desk.study.sequence === sequence) return;
    this.done.push(before);
    this.undone.length = 0;
  }

  async #fit(kind: FitKind): Promise<void> {
    const { desk } = this;
    const before = decided(desk.study);
    const made = await fit(desk, kind, wordLists, { run });
    if (!made.ok) {
      expect(['word without a theme', 'more themes than passages']).toContain(made.code);
      return;
    }
    this.fits++;
    expect(decided(desk.study)).toEqual(before);
    isSound(desk);
  }

  async #split(a: number): Promise<void> {
    const { desk } = this;
    const themes = desk.fitted(desk.study.fit)!.fit.themes;
    const before = decided(desk.study);
    const tried = await trySplit(desk, themes[a % themes.length], wordLists, { run });
    if (!tried.ok) return;
    const made = recordSplit(desk, tried.value);
    if (!made.ok) throw new Error(made.code);
    this.fits++;
    expect(decided(desk.study)).toEqual(before);
    isSound(desk);
  }

  #edit(does: Step['does'], a: number, b: number): Edit | null {
    const { desk } = this;
    const { study } = desk;
    const all = [...study.themes.keys()];
    const theme = all[a % all.length];
    const { words } = desk.fitted(study.fit)!;
    const passage = b % words.passages.length;
    const word = said[b % said.length];
    const at = study.themes.get(theme)!;
    switch (does) {
      case 'name':
        return { kind: 'themeRenamed', theme, from: at.name, to: `Theme ${b}` };
      case 'seed':
        return { kind: 'wordSeeded', theme, word };
      case 'shut out':
        return { kind: 'wordShutOut', theme, word };
      case 'pin':
        return { kind: at.pinned ? 'themeUnpinned' : 'themePinned', theme };
      case 'confirm':
        return codingOn(desk, passage, theme);
      case 'reject':
        return codingOn(desk, passage, theme, 'rejected');
      case 'none': {
        const { transcript, start, end } = words.passages[passage];
        const coding = codingOn(desk, passage, theme) as Extract<Edit, { kind: 'codingMade' }>;
        const { under } = coding.coding;
        const none = { id: desk.context.mintId('none'), transcript, span: { start, end }, under };
        return { kind: 'noneMarked', none };
      }
      case 'merge':
        return { kind: 'themesMerged', into: theme, from: [all[b % all.length]] };
      case 'aside or back':
        return { kind: at.setAside ? 'themeBroughtBack' : 'themeSetAside', theme };
      case 'ask for':
        return { kind: 'themeAdded', theme: askedFor(desk.context.mintId('theme'), `Asked ${b}`) };
      case 'memo':
        return {
          kind: 'memoWritten',
          memo: {
            id: desk.context.mintId('memo'),
            subject: { kind: 'theme', theme },
            text: `about ${b}`,
            reader: 'reader-ada',
            at: '2026-02-03T04:05:06.000Z',
          },
        };
      default:
        return null;
    }
  }
}

/** The fit on screen holds what was decided, and every number in it is one. */
function isSound(desk: Desk): void {
  const { study } = desk;
  const fitted = desk.fitted(study.fit)!;
  const { fit: made, words, theta, phi } = fitted;
  const themes = made.themes.length;
  const size = words.vocabulary.length;
  for (const numbers of [theta, phi, fitted.themeWords, fitted.unexplained]) {
    expect(numbers.every(Number.isFinite)).toBe(true);
  }
  const sums = words.passages.map((_, d) =>
    theta.subarray(d * themes, (d + 1) * themes).reduce((sum, share) => sum + share, 0),
  );
  expect(sums.filter((sum) => Math.abs(sum - 1) > 1e-4)).toEqual([]);
  const withDecisions = themesWithDecisions(study);
  const before = desk.fitted(made.start.from ?? made.start.rowsFrom ?? null);
  for (const theme of study.themes.values()) {
    if (!isModelled(theme)) {
      expect(made.themes).not.toContain(theme.id);
      continue;
    }
    const row = rowOf(fitted, theme.id);
    if (theme.origin === 'asked for' || withDecisions.has(theme.id)) expect(row).not.toBe(-1);
    if (row < 0) continue;
    const own = phi.subarray(row * size, (row + 1) * size);
    for (const word of theme.shutOut) {
      const place = words.vocabulary.indexOf(word);
      if (place >= 0) expect(own[place]).toBe(0);
    }
    const was = before === null ? -1 : rowOf(before, theme.id);
    if (theme.pinned && was >= 0 && theme.shutOut.length === 0 && before!.words === words) {
      const then = before!.phi.subarray(was * size, (was + 1) * size);
      expect(own.every((share, w) => share === then[w])).toBe(true);
    }
  }
  // A passage has nothing of a theme that was rejected there, unless every theme was.
  const all = decisions(study);
  words.passages.forEach((passage, d) => {
    const here = all.filter(
      ({ transcript, span }) => transcript === passage.transcript && belongsTo(span, passage),
    );
    const applies = new Set(here.filter((one) => one.applies).map(({ theme }) => theme));
    const out = new Set(
      here.flatMap(({ theme }) => (applies.has(theme) || rowOf(fitted, theme) < 0 ? [] : theme)),
    );
    if (out.size === themes) return;
    for (const theme of out) expect(theta[d * themes + rowOf(fitted, theme)]).toBe(0);
  });
}

describe('any sequence of decisions and fits', () => {
  test('loses no name, id, coding, pin, seed, shut-out or memo', async () => {
    let fits = 0;
    await fc.assert(
      fc.asyncProperty(steps, async (sequence) => {
        const walk = new Walk(await talkingDesk(2));
        await walk.take({ does: 'from scratch', a: 0, b: 0 });
        for (const step of sequence) {
          if (walk.desk.study.fit === null) await walk.take({ does: 'from scratch', a: 0, b: 0 });
          await walk.take(step);
        }
        await walk.take({ does: 're-fit', a: 0, b: 0 });
        fits += walk.fits;
      }),
      { numRuns: 14, seed: 20261201, endOnFailure: true },
    );
    // Otherwise nothing much was tried.
    expect(fits).toBeGreaterThan(20);
  });
});
