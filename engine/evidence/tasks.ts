import { fitModel, type Watcher } from '../model/index.ts';
import { baseOf, type Base } from './base.ts';
import { scoreNumber, type NumberAsked, type NumberScores } from './how-many.ts';
import type { Material } from './material.ts';
import { refitWithout, type Refit } from './refit.ts';
import { shuffled } from './shuffled.ts';

/**
 * A piece of evidence that depends on nothing but a material and itself, so that it may be made
 * anywhere and in any order.
 */
export type Task =
  | { readonly kind: 'base' }
  | { readonly kind: 'refit'; readonly out: readonly number[] }
  /** The themes that the same model finds in the same study with its words shuffled. */
  | { readonly kind: 'shuffled fit'; readonly seed: number }
  | { readonly kind: 'number'; readonly asked: NumberAsked };

export interface TaskResults {
  readonly base: Base;
  readonly refit: Refit;
  readonly 'shuffled fit': Float32Array;
  readonly number: NumberScores;
}

export type TaskResult = TaskResults[Task['kind']];
export type Progress = (fraction: number) => boolean;

/** Makes one piece; null where `progress` returned false to stop it. */
export function runTask(material: Material, task: Task, progress: Progress): TaskResult | null {
  const watcher: Watcher = { progress: (_point, fraction) => progress(fraction) };
  switch (task.kind) {
    case 'base':
      return progress(0) ? baseOf(material) : null;
    case 'refit':
      return refitWithout(material, task.out, watcher);
    case 'shuffled fit': {
      const { priors, leanings, seed, settings } = material;
      const counts = shuffled(material.counts, task.seed);
      const start = { kind: 'fresh', seed, leanings } as const;
      const fit = fitModel(counts, priors, start, settings, watcher);
      return fit.stopReason === 'stopped by a person' ? null : fit.phi;
    }
    case 'number':
      return scoreNumber(material, task.asked, progress);
  }
}
