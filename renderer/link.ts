import type { Answer, Api, Events, FitProgress, Link, Method, Refused } from '../main/api.ts';
import {
  pack,
  secretPrefix,
  unpack,
  wireProtocol,
  type FromWindow,
  type ToWindow,
} from '../main/link/wire.ts';

/** How the window stands with the rest of Understory. */
export interface Connection {
  /** 'lost' is being mended; 'ended' is not. */
  readonly state: 'connecting' | 'open' | 'lost' | 'ended';
  /** What a person should know, and do; null where all is well. */
  readonly sentence: string | null;
}

/** The link of a window, whichever shell carries it. */
export interface WindowLink extends Link {
  readonly connection: Connection;
  onConnection(listener: (connection: Connection) => void): () => void;
}

/** What the preload of the Electron shell puts into the window. */
export interface Bridge {
  readonly calls: {
    readonly [Name in Method]: (id: number, takes: unknown) => Promise<Answer<unknown>>;
  };
  readonly cancel: (id: number) => void;
  readonly onProgress: (listener: (id: number, progress: FitProgress) => void) => void;
  readonly onEvent: (listener: (event: keyof Events, detail: unknown) => void) => void;
}

/** What one shell does for the link. */
interface Carrier {
  call(id: number, method: Method, takes: unknown): Promise<Answer<unknown>>;
  cancel(id: number): void;
}

interface Heard {
  readonly progress: (id: number, progress: FitProgress) => void;
  readonly event: (event: keyof Events, detail: unknown) => void;
  readonly connection: (connection: Connection) => void;
}

const open: Connection = { state: 'open', sentence: null };
const connecting: Connection = { state: 'connecting', sentence: null };
const lost: Connection = {
  state: 'lost',
  sentence:
    'The window lost its connection to Understory and is trying again. What was decided is on the drive.',
};
const stopped: Connection = {
  state: 'ended',
  sentence:
    'Understory was stopped in the terminal. Start it again to go on; the study is closed and saved.',
};
const notAdmitted: Connection = {
  state: 'ended',
  sentence:
    'This address was used already, or is too old. Press Enter in the terminal where Understory runs, and open the new address.',
};
const cancelled: Refused = {
  refused: 'Stopped. The study is as it was before.',
  code: 'cancelled',
};

const broken: Refused = {
  refused:
    'This is a fault in Understory: the answer did not arrive. The study on the drive holds everything decided so far. Close the window and open it again.',
  code: 'fault',
};

/** The link over whichever shell carries this window. */
export function connect(page: Page = browserPage()): WindowLink {
  const bridge = page.understory;
  return new CarriedLink((heard) =>
    bridge === undefined ? new SocketCarrier(page, heard) : bridgeCarrier(bridge, heard),
  );
}

/** Matches answers and progress to calls by id, and tells listeners of events. */
class CarriedLink implements WindowLink {
  readonly #carrier: Carrier;
  readonly #progress = new Map<number, (progress: FitProgress) => void>();
  readonly #listeners = new Map<keyof Events, Set<(detail: never) => void>>();
  readonly #watchers = new Set<(connection: Connection) => void>();
  #connection: Connection = connecting;
  #lastId = 0;

  constructor(carry: (heard: Heard) => Carrier) {
    this.#carrier = carry({
      progress: (id, progress) => this.#progress.get(id)?.(progress),
      event: (event, detail) => this.#tell(event, detail),
      connection: (connection) => this.#stand(connection),
    });
  }

  #stand(connection: Connection): void {
    if (connection === this.#connection) return;
    const mended = this.#connection.state === 'lost' && connection.state === 'open';
    this.#connection = connection;
    for (const watcher of this.#watchers) watcher(connection);
    // What happened meanwhile was not heard: listeners get the study as it is now.
    if (mended) void this.#catchUp();
  }

  async #catchUp(): Promise<void> {
    const answer = await this.call('overview', null);
    if (!('value' in answer)) return;
    const locked = await this.call('lockedStudy', null);
    if ('value' in locked && locked.value !== null) this.#tell('locked', locked.value);
    else if (answer.value === null) this.#tell('closed', null);
    else this.#tell('changed', answer.value);
  }

  get connection(): Connection {
    return this.#connection;
  }

  onConnection(listener: (connection: Connection) => void): () => void {
    this.#watchers.add(listener);
    return () => void this.#watchers.delete(listener);
  }

  async call<Name extends Method>(
    method: Name,
    takes: Api[Name]['takes'],
    options: Parameters<Link['call']>[2] = {},
  ): Promise<Answer<Api[Name]['gives']>> {
    const { onProgress, signal } = options;
    if (signal?.aborted === true) return cancelled;
    const id = ++this.#lastId;
    const stop = (): void => this.#carrier.cancel(id);
    if (onProgress !== undefined) this.#progress.set(id, onProgress);
    signal?.addEventListener('abort', stop);
    try {
      // The server half answers a method with what the api says that it gives.
      return (await this.#carrier.call(id, method, takes)) as Answer<Api[Name]['gives']>;
    } finally {
      signal?.removeEventListener('abort', stop);
      this.#progress.delete(id);
    }
  }

  on<Name extends keyof Events>(event: Name, listener: (detail: Events[Name]) => void): () => void {
    const listeners = this.#listeners.get(event) ?? new Set();
    this.#listeners.set(event, listeners);
    listeners.add(listener);
    return () => void listeners.delete(listener);
  }

  #tell(event: keyof Events, detail: unknown): void {
    if (event === 'command' && (detail === 'undo' || detail === 'redo') && undoesTyping(detail)) {
      return;
    }
    for (const listener of this.#listeners.get(event) ?? []) listener(detail as never);
  }
}

/** In a field, the menu's undo takes back typing, as everywhere else on the machine. */
function undoesTyping(command: 'undo' | 'redo'): boolean {
  if (typeof document === 'undefined' || !isField(document.activeElement)) return false;
  // Deprecated, and the only way to a field's own history.
  document.execCommand(command);
  return true;
}

function isField(element: Element | null): boolean {
  if (element instanceof HTMLTextAreaElement) return true;
  if (element instanceof HTMLInputElement) {
    return !['button', 'checkbox', 'radio', 'range', 'submit', 'file'].includes(element.type);
  }
  return element instanceof HTMLElement && element.isContentEditable;
}

function bridgeCarrier(bridge: Bridge, heard: Heard): Carrier {
  bridge.onProgress(heard.progress);
  bridge.onEvent(heard.event);
  heard.connection(open);
  return {
    call: async (id, method, takes) => {
      try {
        return await bridge.calls[method](id, plain(takes));
      } catch {
        return broken;
      }
    },
    cancel: (id) => bridge.cancel(id),
  };
}

/** Proxies (Svelte's state) cannot be cloned into another process: a copy of plain data can. */
function plain(value: unknown): unknown {
  if (typeof value !== 'object' || value === null || ArrayBuffer.isView(value)) return value;
  if (Array.isArray(value)) return value.map(plain);
  return Object.fromEntries(Object.entries(value).map(([key, entry]) => [key, plain(entry)]));
}

/** What the link needs of the page around it: given, so that tests can say. */
export interface Page {
  readonly understory?: Bridge | undefined;
  readonly location: { readonly host: string; readonly hash: string; readonly pathname: string };
  /** Belongs to this tab and to this origin, is never sent by itself, and ends with the tab. */
  readonly storage: Pick<Storage, 'getItem' | 'setItem' | 'removeItem'>;
  readonly clearHash: () => void;
  readonly fetch: typeof fetch;
  readonly WebSocket: typeof WebSocket;
}

function browserPage(): Page {
  return {
    understory: (window as { readonly understory?: Bridge }).understory,
    location: window.location,
    storage: window.sessionStorage,
    clearHash: () => window.history.replaceState(null, '', window.location.pathname),
    fetch: window.fetch.bind(window),
    WebSocket: window.WebSocket,
  };
}

const storageKey = 'understory.secret';
/** The shell's own closing code (main/shells/loopback-server.ts). */
const closedByShell = 4000;
const notUnderstood = 4001;
const pauses = [100, 300, 1000, 2000, 4000];

function read(data: unknown): ToWindow | null {
  try {
    return unpack(data as ArrayBuffer) as ToWindow;
  } catch {
    return null;
  }
}

/**
 * The loopback shell. A token in the address is exchanged once for a secret that the tab keeps, so
 * that a window can be loaded anew; a broken connection is taken up again with the same secret.
 */
class SocketCarrier implements Carrier {
  readonly #page: Page;
  readonly #heard: Heard;
  readonly #waiting = new Map<number, (answer: Answer<unknown>) => void>();
  #state: Connection = connecting;
  #attempt: Promise<WebSocket | null>;

  constructor(page: Page, heard: Heard) {
    this.#page = page;
    this.#heard = heard;
    this.#attempt = this.#connect();
  }

  async call(id: number, method: Method, takes: unknown): Promise<Answer<unknown>> {
    const socket = await this.#attempt;
    if (socket === null || socket.readyState !== socket.OPEN) return this.#refusal();
    return new Promise((resolve) => {
      this.#waiting.set(id, resolve);
      this.#send(socket, { say: 'call', id, method, takes });
    });
  }

  cancel(id: number): void {
    void this.#attempt.then((socket) => {
      if (socket?.readyState === socket?.OPEN && socket !== null) {
        this.#send(socket, { say: 'cancel', id });
      }
    });
  }

  #send(socket: WebSocket, message: FromWindow): void {
    socket.send(pack(message));
  }

  #refusal(): Refused {
    return { refused: (this.#state.sentence ?? lost.sentence) as string, code: 'no connection' };
  }

  #set(connection: Connection): void {
    this.#state = connection;
    this.#heard.connection(connection);
  }

  async #connect(): Promise<WebSocket | null> {
    const secret = await this.#secret();
    if (secret === null) {
      this.#set(notAdmitted);
      return null;
    }
    const socket = await this.#open(secret);
    if (socket !== null) this.#set(open);
    else if (await this.#isThere()) {
      // Understory answers and the secret is not known: it was started anew.
      this.#page.storage.removeItem(storageKey);
      this.#set(notAdmitted);
    } else this.#mend(0);
    return socket;
  }

  async #secret(): Promise<string | null> {
    const token = this.#page.location.hash.slice(1);
    if (token !== '') {
      this.#page.clearHash();
      try {
        const answer = await this.#page.fetch('/session', { method: 'POST', body: token });
        if (answer.ok) this.#page.storage.setItem(storageKey, await answer.text());
      } catch {
        // Not reachable: the attempt to connect says so.
      }
    }
    return this.#page.storage.getItem(storageKey);
  }

  #open(secret: string): Promise<WebSocket | null> {
    const address = `ws://${this.#page.location.host}/link`;
    const socket = new this.#page.WebSocket(address, [wireProtocol, secretPrefix + secret]);
    socket.binaryType = 'arraybuffer';
    return new Promise((resolve) => {
      let opened = false;
      socket.onopen = () => {
        opened = true;
        resolve(socket);
      };
      socket.onmessage = ({ data }) => {
        const message = read(data);
        // An answer that cannot be read would leave its call waiting for ever: begin anew.
        if (message === null) socket.close(notUnderstood);
        else this.#hear(message);
      };
      socket.onclose = ({ code }) => {
        if (opened) this.#closed(code);
        else resolve(null);
      };
    });
  }

  #hear(message: ToWindow): void {
    switch (message.say) {
      case 'answer': {
        const resolve = this.#waiting.get(message.id);
        this.#waiting.delete(message.id);
        resolve?.(message.answer as Answer<unknown>);
        return;
      }
      case 'progress':
        this.#heard.progress(message.id, message.progress as FitProgress);
        return;
      case 'event':
        this.#heard.event(message.event as keyof Events, message.detail);
    }
  }

  #closed(code: number): void {
    this.#set(code === closedByShell ? stopped : lost);
    for (const resolve of this.#waiting.values()) resolve(this.#refusal());
    this.#waiting.clear();
    if (code === closedByShell) this.#attempt = Promise.resolve(null);
    else this.#mend(0);
  }

  /** Tries again after a pause; calls made meanwhile are refused with the sentence. */
  #mend(round: number): void {
    this.#attempt = Promise.resolve(null);
    if (round >= pauses.length) {
      this.#set(stopped);
      return;
    }
    this.#set(lost);
    setTimeout(() => {
      const secret = this.#page.storage.getItem(storageKey);
      if (secret === null) {
        this.#set(notAdmitted);
        return;
      }
      void this.#open(secret).then((socket) => {
        if (socket === null) {
          this.#mend(round + 1);
        } else {
          this.#attempt = Promise.resolve(socket);
          this.#set(open);
        }
      });
    }, pauses[round]);
  }

  async #isThere(): Promise<boolean> {
    try {
      return (await this.#page.fetch('/', { method: 'HEAD' })).ok;
    } catch {
      return false;
    }
  }
}
