import type { About, ReportFormat, ReportRequest, ReportStanding } from '../../../main/api.ts';
import type { StudyState } from '../../state/study.svelte.ts';
import { handOver } from '../../parts/hand-over.ts';

/** In the order in which they are offered and sent. */
export const standings: readonly ReportStanding[] = [
  'confirmed',
  'by hand',
  'suggested',
  'rejected',
];

/** What is ticked for a report; kept while a person goes to other places and comes back. */
export class ReportState {
  readonly #study: StudyState;
  #standings = $state.raw<readonly ReportStanding[]>(['confirmed', 'by hand']);
  #themes = $state.raw<readonly string[] | null>(null);
  #saving = $state<ReportFormat | null>(null);
  #about = $state.raw<About | null>(null);
  #begun = false;
  guard = $state(true);

  constructor(study: StudyState) {
    this.#study = study;
  }

  /** Asks once how files can be chosen and saved here. */
  begin(): void {
    if (this.#begun) return;
    this.#begun = true;
    void this.#study.ask('about', null).then((about) => (this.#about = about ?? null));
  }

  /** The output that is being made, or null. */
  get saving(): ReportFormat | null {
    return this.#saving;
  }

  /** Themes that are ticked; null for all, those included that come later. */
  get themes(): readonly string[] | null {
    return this.#themes;
  }

  get request(): ReportRequest {
    return { standings: this.#standings, themes: this.#themes, guard: this.guard };
  }

  has(standing: ReportStanding): boolean {
    return this.#standings.includes(standing);
  }

  tick(standing: ReportStanding, ticked: boolean): void {
    this.#standings = standings.filter((one) => (one === standing ? ticked : this.has(one)));
  }

  allThemes(): void {
    this.#themes = null;
  }

  someThemes(themes: readonly string[]): void {
    this.#themes = themes;
  }

  tickTheme(theme: string, ticked: boolean): void {
    const others = (this.#themes ?? []).filter((id) => id !== theme);
    this.#themes = ticked ? [...others, theme] : others;
  }

  /** Makes an output and puts it where the person says, or with the browser's downloads. */
  async save(format: ReportFormat): Promise<void> {
    if (this.#saving !== null) return;
    this.#study.hush();
    this.#saving = format;
    try {
      const file = await this.#study.ask('report', { ...this.request, format });
      if (file === undefined) return;
      if (this.#about?.dialogs === true) {
        const path = await this.#study.ask('saveFile', file);
        if (typeof path === 'string') this.#study.say('done', `Saved: ${path}`);
      } else {
        handOver(file);
        this.#study.say('done', `${file.fileName} was put with your browser’s downloads.`);
      }
    } finally {
      this.#saving = null;
    }
  }
}

const kept = new WeakMap<StudyState, { readonly study: string; readonly state: ReportState }>();

/** What is ticked in the open study: the same until another study is opened. */
export function reportStateOf(study: StudyState): ReportState {
  const id = study.overview?.study.id ?? '';
  const known = kept.get(study);
  if (known !== undefined && known.study === id) return known.state;
  const state = new ReportState(study);
  kept.set(study, { study: id, state });
  return state;
}
