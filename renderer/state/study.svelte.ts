import { untrack } from 'svelte';
import type {
  Api,
  FitProgress,
  Link,
  LockedStudy,
  Method,
  Overview,
  PassagePlace,
  ReadingListRequest,
  Refused,
} from '../../main/api.ts';
import type { Connection, WindowLink } from '../link.ts';

/** A link that may tell how it stands with the rest of the program. */
type Watched = Link & Partial<Pick<WindowLink, 'onConnection'>>;

export type PlaceName = 'gather' | 'read' | 'shape' | 'report';

/** Milliseconds without a decision after which a re-fit follows. */
const followsAfter = 1200;

/** What a person is told in the line under the header. */
export interface Message {
  readonly kind: 'refused' | 'done' | 'caution';
  readonly text: string;
}

/** Refusals to open a study that are no dead end. */
export const troubles = [
  'noted elsewhere',
  'open elsewhere',
  'damaged',
  'cannot lock',
  'not allowed',
] as const;

export interface Trouble {
  readonly code: (typeof troubles)[number];
  readonly text: string;
  readonly path: string;
}

/**
 * The study as the window knows it: the overview, which place is shown, the fit that runs, the last
 * message. Everything that is decided goes through `ask` or `decide`.
 */
export class StudyState {
  readonly link: Watched;
  #overview = $state.raw<Overview | null>(null);
  #message = $state.raw<Message | null>(null);
  #locked = $state.raw<LockedStudy | null>(null);
  #placeBefore: PlaceName | null = null;
  #lastSign = -Infinity;
  #progress = $state.raw<readonly FitProgress[] | null>(null);
  #refining = $state<number | null>(null);
  #fitting: AbortController | null = null;
  #lost: string | null = null;
  #busy = $state(0);
  place = $state<PlaceName>('gather');
  /** The theme that Shape and Read have in hand. */
  theme = $state<string | null>(null);
  /** Where Read should go next: set by other places, taken by Read. */
  goal = $state.raw<{ transcript: string; start: number; end: number } | null>(null);
  finding = $state(false);
  /** A reading list that another place draws up: taken by Read. */
  list = $state.raw<ReadingListRequest | null>(null);
  /** Passages marked for a theme to be made from them, in the order in which they were marked. */
  marked = $state.raw<readonly PassagePlace[]>([]);
  #following: ReturnType<typeof setTimeout> | undefined;
  /** A study that did not open, and to which there is another way. */
  trouble = $state.raw<Trouble | null>(null);
  #refusal: Refused | null = null;

  constructor(link: Watched) {
    this.link = link;
  }

  /** Begins to listen; gives back what ends it. */
  start(): () => void {
    const ends = [
      this.link.on('changed', (overview) => this.#take(overview)),
      this.link.on('closed', () => this.#leave()),
      this.link.on('refining', ({ fraction, said }) => {
        this.#refining = fraction;
        if (said !== null) this.say('caution', said);
      }),
      this.link.on('caution', (sentence) => this.say('caution', sentence)),
      this.link.on('locked', (locked) => this.#lock(locked)),
      this.link.onConnection?.((connection) => this.#connected(connection)) ?? (() => {}),
    ];
    void this.ask('overview', null).then((overview) => {
      if (overview !== undefined) this.#overview = overview;
    });
    void this.ask('lockedStudy', null).then((locked) => {
      if (locked !== undefined && locked !== null) this.#lock(locked);
    });
    return () => ends.forEach((end) => end());
  }

  get overview(): Overview | null {
    return this.#overview;
  }

  /** The study that waits for its password; null where none does. */
  get locked(): LockedStudy | null {
    return this.#locked;
  }

  get revision(): number {
    return this.#overview?.revision ?? -1;
  }

  get message(): Message | null {
    return this.#message;
  }

  /** The points of the running fit, or null where none runs. */
  get progress(): readonly FitProgress[] | null {
    return this.#progress;
  }

  /** How far the full answer behind the quick one is, 0 to 1; null where none is made. */
  get refining(): number | null {
    return this.#refining;
  }

  get busy(): boolean {
    return this.#busy > 0;
  }

  isMarked({ transcript, start, end }: PassagePlace): boolean {
    return this.marked.some(
      (one) => one.transcript === transcript && one.start === start && one.end === end,
    );
  }

  mark(place: PassagePlace, marked: boolean): void {
    const { transcript, start, end } = place;
    const others = this.marked.filter(
      (one) => one.transcript !== transcript || one.start !== start || one.end !== end,
    );
    this.marked = marked ? [...others, { transcript, start, end }] : others;
  }

  say(kind: Message['kind'], text: string): void {
    this.#message = { kind, text };
  }

  hush(): void {
    this.#message = null;
  }

  /** Calls a method; what it gives, or undefined where it was refused (the sentence is shown). */
  async ask<Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
    options?: Parameters<Link['call']>[2],
  ): Promise<Api[Name]['gives'] | undefined> {
    // Asked from an effect, this must not make the effect depend on what it changes.
    untrack(() => this.#busy++);
    try {
      const answer = await this.link.call(method, takes, options);
      if ('value' in answer) return answer.value;
      this.#refusal = answer;
      // What waits for a password has a page of its own; what was closed by the lock has no answer.
      const silent =
        answer.code === 'locked' || (answer.code === 'no study' && this.#locked !== null);
      if (!silent) this.say('refused', answer.refused);
      return undefined;
    } finally {
      this.#busy--;
    }
  }

  /** A decision: its answer is the overview after it. True where it was made. */
  async decide<Name extends MethodGiving<Overview>>(
    method: Name,
    takes: Api[Name]['takes'],
  ): Promise<boolean> {
    this.hush();
    const overview = await this.ask(method, takes);
    if (overview === undefined) return false;
    this.#take(overview as Overview);
    this.#follow();
    return true;
  }

  /**
   * A re-fit follows decisions that wait for one, where the study says so: a moment later, so that
   * several in a row share it. Taking something back is no such decision, or it could not be done.
   */
  #follow(): void {
    clearTimeout(this.#following);
    const { followChanges, waiting } = this.#overview ?? { followChanges: false, waiting: [] };
    if (!followChanges || waiting.length === 0) return;
    this.#following = setTimeout(() => {
      if (this.#progress !== null) this.#follow();
      else if (this.#overview !== null && this.#overview.waiting.length > 0) {
        void this.fit('re-fit');
      }
    }, followsAfter);
  }

  async undo(): Promise<void> {
    await this.#back('undo');
  }

  async redo(): Promise<void> {
    await this.#back('redo');
  }

  /** Opens, starts or shows a study; true where one is open afterwards. */
  async enter<Name extends 'openDemo' | 'openStudy' | 'startStudy' | 'openBackup' | 'unlockStudy'>(
    method: Name,
    takes: Api[Name]['takes'],
  ): Promise<boolean> {
    this.hush();
    this.#progress = method === 'openDemo' ? [] : null;
    const overview = await this.ask(method, takes, { onProgress: (point) => this.#trace(point) });
    this.#progress = null;
    if (overview === undefined) this.#seeTrouble();
    if (overview === undefined || overview === null) return false;
    this.show(overview);
    return true;
  }

  /** Another study is open now, or the same from another file. */
  show(overview: Overview, stay = false): void {
    this.trouble = null;
    this.#overview = overview;
    this.#locked = null;
    const back = this.#placeBefore;
    this.#placeBefore = null;
    if (stay) return;
    this.theme = null;
    this.goal = null;
    this.marked = [];
    this.place = back ?? (overview.fitted ? 'shape' : 'gather');
  }

  #seeTrouble(): void {
    const { code = '', refused: text = '', path } = this.#refusal ?? {};
    const known = troubles.find((one) => one === code);
    if (known === undefined || path === undefined) return;
    this.hush();
    this.trouble = { code: known, text, path };
  }

  /** Closes a study that has a password, so that it has to be typed again. */
  async lockNow(): Promise<void> {
    await this.ask('lockStudy', null);
  }

  /** Lets the locked study be; shows what was open before, or the first page. */
  async leaveLocked(): Promise<void> {
    const overview = await this.ask('leaveLocked', null);
    if (overview === undefined) return;
    this.#leave();
    this.#overview = overview;
  }

  /** Sets, changes or removes the password; what else is to be known, or null where it was refused. */
  async protect(current: string | null, next: string | null): Promise<readonly string[] | null> {
    this.hush();
    const result = await this.ask('setPassword', { current, next });
    if (result === undefined) return null;
    this.#take(result.overview);
    return result.notes;
  }

  /** A person moved, typed or clicked: told now and then, while there is something to lock. */
  sign(now: number = Date.now()): void {
    if (this.#overview?.hasPassword !== true || Math.abs(now - this.#lastSign) < 10_000) return;
    this.#lastSign = now;
    void this.link.call('stillHere', null);
  }

  async close(): Promise<void> {
    if ((await this.ask('closeStudy', null)) !== undefined) this.#leave();
  }

  /** Fits and shows how it goes; a stopped fit changes nothing. */
  async fit(kind: 'from scratch' | 're-fit', themes: number | null = null): Promise<boolean> {
    if (this.#fitting !== null) return false;
    this.hush();
    this.#fitting = new AbortController();
    this.#progress = [];
    const { signal } = this.#fitting;
    const result = await this.ask(
      'fit',
      { kind, themes },
      { signal, onProgress: (point) => this.#trace(point) },
    );
    this.#fitting = null;
    this.#progress = null;
    if (result === undefined) return false;
    this.#take(result.overview);
    return true;
  }

  stopFit(): void {
    this.#fitting?.abort();
  }

  async #back(method: 'undo' | 'redo'): Promise<void> {
    this.hush();
    clearTimeout(this.#following);
    const result = await this.ask(method, null);
    if (result === undefined) return;
    this.#take(result.overview);
    const verb = method === 'undo' ? 'Taken back' : 'Done again';
    if (result.did !== null) this.say('done', `${verb}: ${result.did}.`);
  }

  /** A broken connection is said until it is mended. */
  #connected({ sentence }: Connection): void {
    if (sentence !== null) this.#message = { kind: 'refused', text: sentence };
    else if (this.#message?.text === this.#lost) this.#message = null;
    this.#lost = sentence;
  }

  #trace(point: FitProgress): void {
    this.#progress = [...(this.#progress ?? []), point];
  }

  #take(overview: Overview): void {
    const current = this.#overview;
    if (current !== null && current.study.id === overview.study.id) {
      if (overview.revision < current.revision) return;
    }
    this.#overview = overview;
    this.#refining = overview.refining?.fraction ?? null;
  }

  #lock(locked: LockedStudy): void {
    const { place } = this;
    const wasOpen = this.#overview !== null;
    this.#leave();
    if (wasOpen && locked.why !== 'opening') this.#placeBefore = place;
    this.#locked = locked;
  }

  #leave(): void {
    clearTimeout(this.#following);
    this.list = null;
    this.marked = [];
    this.#overview = null;
    this.#locked = null;
    this.#placeBefore = null;
    this.#progress = null;
    this.#refining = null;
    this.finding = false;
    this.#message = null;
    this.theme = null;
    this.goal = null;
    this.place = 'gather';
  }
}

/** Methods whose answer is of one kind. */
export type MethodGiving<Value> = {
  [Name in Method]: Api[Name]['gives'] extends Value ? Name : never;
}[Method];
