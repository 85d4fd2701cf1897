import type { EvidenceRequest, EvidenceView } from '../../../main/api.ts';
import type { StudyState } from '../../state/study.svelte.ts';
import { View } from '../../state/view.svelte.ts';

/**
 * What is measured of the fit on screen, and how a measure that runs is going. It goes on while
 * another place is shown.
 */
export class Evidence {
  readonly #study: StudyState;
  readonly #view: View<'evidenceView'>;
  #measuring = $state.raw<{
    readonly what: EvidenceRequest['what'];
    readonly fraction: number;
  } | null>(null);
  #stop: AbortController | null = null;

  constructor(study: StudyState) {
    this.#study = study;
    this.#view = new View(study, 'evidenceView');
  }

  get value(): EvidenceView | null {
    return this.#view.value;
  }

  get measuring(): { readonly what: EvidenceRequest['what']; readonly fraction: number } | null {
    return this.#measuring;
  }

  load(): void {
    void this.#view.load(null);
  }

  async measure(request: EvidenceRequest): Promise<void> {
    if (this.#stop !== null) return;
    this.#study.hush();
    const stop = new AbortController();
    this.#stop = stop;
    this.#measuring = { what: request.what, fraction: 0 };
    const overview = await this.#study.ask('gatherEvidence', request, {
      signal: stop.signal,
      onProgress: ({ fraction }) => (this.#measuring = { what: request.what, fraction }),
    });
    this.#stop = null;
    this.#measuring = null;
    if (overview !== undefined) this.load();
  }

  stop(): void {
    this.#stop?.abort();
  }
}

const kept = new WeakMap<StudyState, { readonly study: string; readonly evidence: Evidence }>();

/** The same for the open study until another one is opened. */
export function evidenceOf(study: StudyState): Evidence {
  const id = study.overview?.study.id ?? '';
  const known = kept.get(study);
  if (known?.study === id) return known.evidence;
  const evidence = new Evidence(study);
  kept.set(study, { study: id, evidence });
  return evidence;
}
