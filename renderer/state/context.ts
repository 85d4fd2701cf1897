import { getContext, setContext } from 'svelte';
import type { StudyState } from './study.svelte.ts';

const key = Symbol('study');

export function provideStudy(study: StudyState): StudyState {
  return setContext(key, study);
}

/** The study state of the window; for components below App. */
export function useStudy(): StudyState {
  return getContext<StudyState>(key);
}
