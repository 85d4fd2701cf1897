import { tick } from 'svelte';
import type {
  CodeRequest,
  DrawRequest,
  PassagePlace,
  PassageView,
  ReadingList,
  ReadingListRequest,
  Span,
  StoppedAt,
  ThemeRowView,
  TranscriptView,
  UnderView,
} from '../../../main/api.ts';
import type { StudyState } from '../../state/study.svelte.ts';
import type { Preferences } from './preferences.svelte.ts';
import { KeptTranscripts, keyOf, newlyDecided, Positions } from './kept-transcripts.ts';
import { stoppedAt, takenUp } from './stopped.ts';

export const firstRequest: ReadingListRequest = {
  kind: 'in order',
  theme: null,
  transcript: null,
  unreadOnly: false,
  count: 60,
  seed: 1,
};

/** How a passage came into sight that another place of the app pointed to. */
const pointedTo = 'opened from another place';
const keptTranscripts = 8;

/**
 * Where a reader is: the reading list, the place in it, the transcripts around it. A decision moves
 * on at once and is told to the study meanwhile; of the transcript only that passage is asked for
 * again. What others change (undo, a fit, another window) asks for the transcript anew.
 */
export class Reading {
  readonly #study: StudyState;
  readonly #preferences: Preferences;

  #request = $state.raw<ReadingListRequest>(firstRequest);
  #list = $state.raw<ReadingList | null>(null);
  #place = $state.raw<PassagePlace | null>(null);
  #index = $state(-1);
  #decided = $state(0);
  #cameBy = $state<string | null>(null);
  #chosen = $state<string | null>(null);
  #transcripts = $state.raw(new KeptTranscripts());
  #names = $state.raw<readonly { id: string; name: string }[]>([]);
  #themes = $state.raw<readonly ThemeRowView[]>([]);
  #ready = $state(false);
  /** Places of a keyword list that were in hand: only these can be coded together. */
  #opened = $state.raw<readonly PassagePlace[]>([]);

  #asked: readonly { readonly id: string; readonly view: Promise<TranscriptView | undefined> }[] =
    [];
  #positions = new Positions();
  #deciding = 0;
  #keeping: ReturnType<typeof setTimeout> | undefined;
  #seen = -1;
  /** Places of the decisions made here, newest last: where undo goes back to. */
  #made: PassagePlace[] = [];

  constructor(study: StudyState, preferences: Preferences) {
    this.#study = study;
    this.#preferences = preferences;
  }

  get request(): ReadingListRequest {
    return this.#request;
  }

  get list(): ReadingList | null {
    return this.#list;
  }

  /** False until the first list has been asked for. */
  get ready(): boolean {
    return this.#ready;
  }

  /** How many places of the list carry a decision by now. */
  get decided(): number {
    return this.#decided;
  }

  /** From 0 in the list; -1 where the passage in hand is not on it. */
  get index(): number {
    return this.#place !== null && this.#positions.of(this.#place) >= 0 ? this.#index : -1;
  }

  get place(): PassagePlace | null {
    return this.#place;
  }

  /** Transcripts in the order of gathering. */
  get names(): readonly { id: string; name: string }[] {
    return this.#names;
  }

  /** In codebook order, without those that are set aside. */
  get themes(): readonly ThemeRowView[] {
    return this.#themes;
  }

  get transcript(): TranscriptView | null {
    return this.#place === null ? null : this.#transcripts.get(this.#place.transcript);
  }

  get passage(): PassageView | null {
    const place = this.#place;
    if (place === null) return null;
    const passages = this.transcript?.passages ?? [];
    return passages.find(({ start, end }) => start === place.start && end === place.end) ?? null;
  }

  get inOrder(): boolean {
    return this.#request.kind === 'in order';
  }

  /** Whether suggestions are in sight: never in a cold sample that was not scored yet. */
  get suggesting(): boolean {
    return (
      this.#preferences.suggestions &&
      this.#study.overview?.fitted === true &&
      this.passage?.heldBack !== true
    );
  }

  /** Whether passages of the list can be coded together: it was found by words. */
  get findsWords(): boolean {
    return this.#request.kind === 'keyword in context';
  }

  /** Passages of a keyword list that were opened, in the order in which they were. */
  get opened(): readonly PassagePlace[] {
    return this.#opened;
  }

  /** The theme that a decision would be about: chosen by hand, or the list's, or the strongest. */
  get theme(): string | null {
    const passage = this.passage;
    if (passage === null) return this.#chosen ?? this.#study.theme;
    if (this.#request.kind === 'earlier wording') return this.#chosen ?? this.#request.theme;
    const offered = passage.suggestions.map(({ theme }) => theme);
    const wanted = [this.#chosen, this.#request.theme];
    const found = wanted.find((theme) => theme !== null && offered.includes(theme));
    if (this.suggesting && (found ?? offered[0]) !== undefined) return found ?? offered[0]!;
    return this.#chosen ?? passage.codings[0]?.theme ?? this.#request.theme ?? this.#study.theme;
  }

  get under(): UnderView {
    return {
      drawnBy: this.#cameBy ?? this.#list?.name ?? pointedTo,
      seenSuggestion: this.suggesting,
    };
  }

  /** Takes up where the reader stopped, or goes where another place of the app pointed to. */
  async begin(stopped: StoppedAt | null): Promise<void> {
    this.#seen = this.#study.revision;
    await Promise.all([this.#loadNames(), this.loadThemes()]);
    const overview = this.#study.overview;
    if (stopped === null || overview === null) {
      await this.read(firstRequest);
      return;
    }
    const { request, at } = takenUp(stopped, this.#orders(), overview);
    await this.read(request ?? firstRequest, at);
  }

  /** Draws up a list and goes to its first passage, or to the one where the reader stopped. */
  async read(
    request: ReadingListRequest,
    stopped: { readonly transcript: string; readonly start: number } | null = null,
  ): Promise<boolean> {
    const list = await this.#study.ask('readingList', request);
    this.#ready = true;
    if (list === undefined) return false;
    if (list.name !== this.#list?.name) this.#opened = [];
    this.#request = request;
    this.#list = list;
    this.#decided = list.decided;
    this.#positions = new Positions(list.places);
    const found =
      stopped === null
        ? -1
        : list.places.findIndex(
            ({ transcript, start }) => transcript === stopped.transcript && start === stopped.start,
          );
    this.#to(list.places[Math.max(found, 0)] ?? null, null);
    return true;
  }

  /** Draws passages, so that the trail knows which, and reads them. */
  async draw(request: DrawRequest): Promise<boolean> {
    if (this.#study.overview?.readOnly !== true) {
      const drawn = await this.#while(() => this.#study.decide('drawSample', request), null);
      if (!drawn) return false;
    }
    return this.read({ ...firstRequest, ...request });
  }

  /** The list again, as it is now; the passage in hand stays. */
  async again(): Promise<void> {
    await this.read(this.#request, this.#place);
  }

  /** One passage on or back in the list; false at its ends. */
  step(by: 1 | -1): boolean {
    const places = this.#list?.places ?? [];
    let next = this.#index + by;
    if (this.index < 0 && this.#place !== null && this.inOrder) {
      next = this.#beside(this.#place, by);
    }
    const place = places[next];
    if (place === undefined) return false;
    this.#to(place, null);
    return true;
  }

  /** The nearest position on or back of a passage that is not on the list itself. */
  #beside({ transcript, start }: PassagePlace, by: 1 | -1): number {
    const places = this.#list?.places ?? [];
    const order = this.#names.map(({ id }) => id);
    const at = order.indexOf(transcript);
    const isAfter = (place: PassagePlace): boolean =>
      place.transcript === transcript ? place.start > start : order.indexOf(place.transcript) > at;
    const after = places.findIndex(isAfter);
    if (by > 0) return after < 0 ? places.length : after;
    return (after < 0 ? places.length : after) - 1;
  }

  /** Takes a passage of the transcript on screen in hand. */
  take(passage: Span): void {
    if (this.#place === null) return;
    const { transcript } = this.#place;
    this.#to({ transcript, start: passage.start, end: passage.end }, null);
  }

  toTranscript(id: string): void {
    const place = this.#list?.places.find(({ transcript }) => transcript === id);
    if (place !== undefined) this.#to(place, null);
    else void this.goTo({ transcript: id, start: 0, end: 0 });
  }

  /** Goes to a passage, or to the one around or after a place, wherever it is. */
  async goTo(goal: PassagePlace): Promise<void> {
    const view = await this.#load(goal.transcript);
    if (view === undefined) return;
    const passage =
      view.passages.find(({ start, end }) => start === goal.start && end === goal.end) ??
      view.passages.find(({ end }) => end > goal.start) ??
      view.passages[view.passages.length - 1];
    if (passage === undefined) return;
    const place = { transcript: goal.transcript, start: passage.start, end: passage.end };
    if (this.#positions.of(place) < 0 && !this.inOrder) {
      await this.read({ ...firstRequest, kind: 'in order' });
    }
    this.#to(place, pointedTo);
  }

  choose(theme: string): void {
    this.#chosen = theme;
  }

  /** Chooses another of the suggestions here. */
  chooseBeside(by: 1 | -1): void {
    const offered = this.passage?.suggestions ?? [];
    const at = offered.findIndex(({ theme }) => theme === this.theme);
    const next = offered[at + by];
    if (this.suggesting && next !== undefined) this.#chosen = next.theme;
  }

  async confirm(theme: string): Promise<void> {
    await this.#decideHere('confirm', theme);
  }

  async reject(theme: string): Promise<void> {
    await this.#decideHere('reject', theme);
  }

  async none(): Promise<void> {
    const place = this.#place;
    if (place === null || this.passage === null) return;
    const { under } = this;
    await this.#goOnWhile(place, () => this.#study.decide('markNone', { place, ...under }));
  }

  /** Gives the whole passage a theme that a person chose from the codebook. */
  async codePassage(theme: string): Promise<void> {
    const place = this.#place;
    const passage = this.passage;
    if (place === null || passage === null) return;
    const there = passage.codings.find(
      (coding) =>
        coding.theme === theme &&
        coding.standing !== 'rejected' &&
        coding.span.start === place.start &&
        coding.span.end === place.end,
    );
    if (there !== undefined) {
      this.#study.say('done', `This passage carries “${there.themeName}” already.`);
      return;
    }
    // Where nothing was in sight nothing was confirmed: it was found by hand.
    const method = this.suggesting ? 'confirm' : 'codeByHand';
    const taken: CodeRequest = { place, theme, memo: '', ...this.under };
    await this.#while(() => this.#study.decide(method, taken), place);
    await this.#refreshPassage(place);
  }

  /** Gives a stretch of the transcript on screen a theme. */
  async codeStretch(span: Span, theme: string): Promise<boolean> {
    const place = this.#place;
    if (place === null) return false;
    const stretch = { transcript: place.transcript, start: span.start, end: span.end };
    return this.#changeHere(() =>
      this.#study.decide('codeByHand', { place: stretch, theme, memo: '', ...this.under }),
    );
  }

  async removeCoding(coding: string): Promise<void> {
    const transcript = this.#place?.transcript;
    if (transcript === undefined) return;
    await this.#changeHere(() => this.#study.decide('removeCoding', { transcript, coding }));
  }

  /** Gives a coding of the passage in hand another theme. */
  async moveCoding(coding: string, theme: string): Promise<boolean> {
    const transcript = this.#place?.transcript;
    if (transcript === undefined) return false;
    return this.#changeHere(() =>
      this.#study.decide('moveCoding', { transcript, coding, theme, ...this.under }),
    );
  }

  /** Codes every passage of the keyword list that was opened. */
  async codeOpened(theme: string): Promise<boolean> {
    const places = this.#opened;
    if (places.length === 0) return false;
    const drawnBy = this.#list?.name ?? pointedTo;
    const done = await this.#changeHere(() =>
      this.#study.decide('codeTogether', {
        places,
        theme,
        drawnBy,
        seenSuggestion: this.suggesting,
      }),
    );
    if (done) {
      this.#transcripts = this.#transcripts.outdated();
      this.#asked = [];
      if (this.#place !== null) void this.#load(this.#place.transcript, true);
      this.#opened = [];
    }
    return done;
  }

  async clearNone(none: string): Promise<void> {
    const transcript = this.#place?.transcript;
    if (transcript === undefined) return;
    await this.#changeHere(() => this.#study.decide('clearNone', { transcript, none }));
  }

  async writeMemo(text: string, coding: string | null): Promise<boolean> {
    const place = this.#place;
    if (place === null) return false;
    const { transcript } = place;
    const on =
      coding === null
        ? ({ kind: 'passage', place } as const)
        : ({ kind: 'coding', transcript, coding } as const);
    return this.#changeHere(() => this.#study.decide('writeMemo', { on, text }));
  }

  async reviseMemo(memo: string, text: string): Promise<boolean> {
    return this.#changeHere(() => this.#study.decide('reviseMemo', { memo, text }));
  }

  /** A new theme that has no words of its own; its id, or null where it was refused. */
  async addTheme(name: string): Promise<string | null> {
    this.#study.hush();
    let added: { theme: string } | undefined;
    await this.#while(async () => {
      added = await this.#study.ask('addTheme', { name, byHand: true, seeds: [] });
      return added !== undefined;
    }, null);
    if (added === undefined) return null;
    await this.loadThemes();
    return added.theme;
  }

  /** Takes the last decision back and shows where it was. */
  async undo(): Promise<void> {
    const back = this.#made.pop();
    await this.#study.undo();
    if (back !== undefined && keyOf(back) !== (this.#place === null ? '' : keyOf(this.#place))) {
      this.#to(back, null);
    }
  }

  /** Called when the study's revision changes: what was not decided here is asked for anew. */
  async follow(revision: number): Promise<void> {
    if (this.#deciding > 0 || revision === this.#seen || !this.#ready) return;
    this.#seen = revision;
    this.#transcripts = this.#transcripts.outdated();
    this.#asked = [];
    const current = this.#place?.transcript ?? null;
    const [fresh] = await Promise.all([
      current === null ? undefined : this.#load(current),
      this.#loadNames(),
      this.loadThemes(),
    ]);
    // Somebody may have gone on meanwhile.
    if (this.#place !== null && this.#place.transcript !== current) return;
    const place = this.#place;
    const there = fresh?.passages.some(
      ({ start, end }) => start === place?.start && end === place.end,
    );
    // Passages were divided anew, or their transcript is gone: so is the list.
    if (place === null || there !== true) await this.again();
  }

  async loadThemes(): Promise<void> {
    const shape = await this.#study.ask('shapeView', null);
    if (shape !== undefined) this.#themes = shape.themes.filter(({ setAside }) => !setAside);
  }

  async #loadNames(): Promise<void> {
    const gathered = await this.#study.ask('gatherView', null);
    if (gathered !== undefined) {
      this.#names = gathered.transcripts.map(({ id, name }) => ({ id, name }));
    }
  }

  #to(place: PassagePlace | null, cameBy: string | null): void {
    this.#place = place;
    this.#chosen = null;
    this.#cameBy = cameBy;
    if (place === null) {
      this.#index = -1;
      return;
    }
    const position = this.#positions.of(place);
    if (
      position >= 0 &&
      this.findsWords &&
      !this.#opened.some((one) => keyOf(one) === keyOf(place))
    ) {
      this.#opened = [...this.#opened, place];
    }
    if (position >= 0) this.#index = position;
    else this.#cameBy ??= pointedTo;
    void this.#load(place.transcript).then(() => this.#loadAhead());
    this.#keep();
  }

  #loadAhead(): void {
    const next = this.#list?.places[this.#index + 1];
    if (next !== undefined) void this.#load(next.transcript);
  }

  #orders() {
    return { transcripts: this.#names, themes: this.#themes };
  }

  /** Told to the machine once one stays at a place for a moment. */
  #keep(): void {
    clearTimeout(this.#keeping);
    this.#keeping = setTimeout(() => this.keepPlace(), 500);
  }

  /** Keeps where the reader is, on this machine. */
  keepPlace(): void {
    clearTimeout(this.#keeping);
    if (this.#place === null || this.#study.overview === null) return;
    const stopped = stoppedAt(this.#request, this.#place, this.#orders());
    void this.#study.ask('keepReading', { preferences: null, stopped });
  }

  #load(id: string, anew = false): Promise<TranscriptView | undefined> {
    const known = this.#transcripts.get(id);
    if (known !== null && this.#transcripts.isFresh(id) && !anew) return Promise.resolve(known);
    const asked = this.#asked.find((each) => each.id === id);
    if (asked !== undefined && !anew) return asked.view;
    const view = this.#study.ask('transcriptView', { transcript: id }).then((found) => {
      // A later question has a newer answer.
      if (!this.#asked.some((each) => each.view === view)) return found;
      this.#asked = this.#asked.filter((each) => each.view !== view);
      if (found !== undefined) this.#show(found);
      return found;
    });
    this.#asked = [...this.#asked.filter((each) => each.id !== id), { id, view }];
    return view;
  }

  #show(view: TranscriptView): void {
    const before = this.#transcripts.get(view.id)?.passages ?? [];
    this.#decided += newlyDecided(this.#positions, view.id, before, view.passages);
    const shown = this.#place?.transcript ?? null;
    this.#transcripts = this.#transcripts.with(view, keptTranscripts, shown);
  }

  async #decideHere(method: 'confirm' | 'reject', theme: string): Promise<void> {
    const place = this.#place;
    if (place === null || this.passage === null) return;
    const taken: CodeRequest = { place, theme, memo: '', ...this.under };
    await this.#goOnWhile(place, () => this.#study.decide(method, taken));
  }

  /** The next passage is on screen before the decision has reached the study. */
  async #goOnWhile(place: PassagePlace, decide: () => Promise<boolean>): Promise<void> {
    const cameBy = this.#cameBy;
    const goingOn = this.#preferences.goOn;
    const moved = goingOn && this.step(1);
    const next = this.#place;
    if (moved) await tick();
    if (!(await this.#while(decide, place))) {
      if (moved && this.#place === next) this.#to(place, cameBy);
      return;
    }
    await this.#refreshPassage(place);
    if (goingOn && !moved) this.#study.say('done', 'This was the last passage of the list.');
  }

  async #changeHere(decide: () => Promise<boolean>): Promise<boolean> {
    const place = this.#place;
    if (place === null || !(await this.#while(decide, place))) return false;
    await this.#load(place.transcript, true);
    return true;
  }

  async #while(decide: () => Promise<boolean>, place: PassagePlace | null): Promise<boolean> {
    this.#deciding++;
    try {
      const done = await decide();
      if (done && place !== null) this.#made.push(place);
      return done;
    } finally {
      this.#deciding--;
      this.#seen = this.#study.revision;
    }
  }

  async #refreshPassage(place: PassagePlace): Promise<void> {
    const fresh = await this.#study.ask('passageView', { place });
    const before = this.#transcripts.get(place.transcript);
    if (fresh === undefined || before === null) return;
    this.#transcripts = this.#transcripts.withPassage(place.transcript, fresh);
    this.#decided += newlyDecided(this.#positions, before.id, before.passages, [fresh]);
  }
}
