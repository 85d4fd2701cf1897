import {
  isHeldBack,
  resolveTheme,
  type Entry,
  type Study,
  type Transcript,
} from '../../engine/study/index.ts';
import type { Prepared } from '../../engine/text/index.ts';
import {
  modelledThemes,
  settingsOf,
  type Fitted,
  type StudySettings,
} from '../../engine/themes/index.ts';
import { transcriptsInOrder, type Desk } from '../desk.ts';
import { themeName } from '../reports/theme-name.ts';
import { wordLists } from '../word-lists.ts';
import { runPrepare } from '../work/run-prepare.ts';
import { decidedIn, type DecidedTranscript } from './decided-now.ts';
import { Kept, KeptEach } from './kept.ts';
import { offersIn, type OffersIn } from './offers-now.ts';
import { PassagesNow, type PassageBasis, type Placed } from './passages-now.ts';
import { sinceFit, type SinceFit } from './since-fit.ts';
import { columnsKey, themesNow, type ThemesNow } from './themes-now.ts';
import { strengthsWithout } from './without-decisions.ts';

/**
 * What the views read: the study as it stands, and everything that follows from it, each kept until
 * what it depends on changes. A decision in one transcript leaves what belongs to others alone.
 * `settled` has to be awaited before passages are asked for.
 */
export class StudyNow {
  readonly desk: Desk;
  readonly #passages: PassagesNow;
  readonly #trail = new Kept<ReadonlyMap<number, Entry>>();
  readonly #order = new Kept<readonly Transcript[]>();
  readonly #settings = new Kept<StudySettings>();
  readonly #since = new Kept<SinceFit | null>();
  readonly #columnsKey = new Kept<string>();
  readonly #themes = new Kept<ThemesNow>();
  readonly #labels = new Kept<Map<string, string>>();
  readonly #decided = new KeptEach<string, DecidedTranscript>();
  readonly #offers = new KeptEach<string, OffersIn>();
  readonly #prepared = new Kept<Promise<Prepared>>();

  constructor(desk: Desk) {
    this.desk = desk;
    this.#passages = new PassagesNow(desk);
  }

  get study(): Study {
    return this.desk.study;
  }

  /** The trail by sequence number, in order. */
  get trail(): ReadonlyMap<number, Entry> {
    return this.#trail.get(
      [this.study.sequence],
      () => new Map([...this.desk.entries].map((entry) => [entry.sequence, entry])),
    );
  }

  /** Transcripts by name. */
  get transcripts(): readonly Transcript[] {
    const { transcripts } = this.study;
    return this.#order.get([transcripts], () => transcriptsInOrder(this.study));
  }

  get settings(): StudySettings {
    const { settings } = this.study;
    return this.#settings.get([settings], () => settingsOf(settings));
  }

  get fitted(): Fitted | null {
    return this.desk.fitted(this.study.fit);
  }

  /** What was decided since the fit on screen; null where there is none. */
  get since(): SinceFit | null {
    const { study, fitted } = this;
    return this.#since.get([study], () =>
      fitted === null ? null : sinceFit(study, this.desk.entries, fitted.fit),
    );
  }

  /** Names and words of themes are no part of it, so that a rename leaves it alone. */
  get themes(): ThemesNow {
    const { study, fitted } = this;
    const key = this.#columnsKey.get([study.themes], () => columnsKey(study));
    return this.#themes.get([key, fitted], () => themesNow(study, fitted));
  }

  /** What a theme is called on screen. */
  label(id: string): string {
    const { study, fitted } = this;
    const labels = this.#labels.get([study.themes, fitted], () => new Map());
    const theme = resolveTheme(study, id);
    if (theme === undefined) return 'a theme that is no more';
    const known = labels.get(theme.id) ?? themeName(theme, fitted);
    labels.set(theme.id, known);
    return known;
  }

  /** Resolves once every passage can be had at once. */
  settled(): Promise<void> {
    return this.#passages.isSettled(this.#basis())
      ? Promise.resolve()
      : this.#passages.settle(() => this.#basis());
  }

  passagesIn(transcript: string): readonly Placed[] {
    return this.#passages.in(this.#basis(), transcript);
  }

  decidedIn(transcript: string): DecidedTranscript {
    const { codings, nones } = this.study;
    const on = [this.passagesIn(transcript), codings.get(transcript), nones.get(transcript)];
    return this.#decided.get(transcript, on, () =>
      decidedIn(this.passagesIn(transcript), codings.get(transcript), nones.get(transcript)),
    );
  }

  offersIn(transcript: string): OffersIn {
    const placed = this.passagesIn(transcript);
    const decided = this.decidedIn(transcript);
    const { study, themes, settings } = this;
    return this.#offers.get(transcript, [placed, decided, themes, settings, study.draws], () =>
      offersIn(
        placed,
        decided,
        themes,
        (id) => this.themeOf(id),
        settings.suggestions,
        (passage) => isHeldBack(study, transcript, passage),
        (row) => strengthsWithout(this, row),
      ),
    );
  }

  /** The theme that an id stands for today, merges followed. */
  themeOf(id: string): string | undefined {
    return resolveTheme(this.study, id)?.id;
  }

  participantName(id: string): string {
    // A speaker whom nobody tied to a person counts under "transcript/label".
    return this.study.participants.get(id)?.name ?? id.slice(id.indexOf('/') + 1);
  }

  /** Passages and counted words under the settings of now: the fit's own while they are the same. */
  prepared(): Promise<Prepared> {
    const { fitted, since, study, settings } = this;
    const seeds = modelledThemes(study).flatMap((theme) => theme.seeds);
    if (fitted !== null && since?.stale === false) return Promise.resolve(fitted.words);
    const on = [
      JSON.stringify([settings.text, seeds]),
      ...this.transcripts.flatMap(({ id, text, turns, speakers }) => [id, text, turns, speakers]),
    ];
    return this.#prepared.get(on, () => {
      const prepared = runPrepare({
        transcripts: this.desk.transcriptTexts(),
        text: settings.text,
        lists: wordLists,
        seeds,
      });
      prepared.catch(() => this.#prepared.forget());
      return prepared;
    });
  }

  #basis(): PassageBasis {
    const { study, fitted, since, settings } = this;
    return { study, fitted, since, text: settings.text };
  }
}
