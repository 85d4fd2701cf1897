import * as v from 'valibot';
import { methods, type Answer, type FitProgress, type Method } from '../api.ts';
import type { CallContext, Handlers } from '../window/session-types.ts';
import { limits } from './limits.ts';
import { payloads } from './payloads.ts';
import { refusals } from './sentences.ts';

export interface LineOptions {
  readonly handlers: Handlers;
  /** Passes on how far a running call has come. */
  readonly onProgress: (id: number, progress: FitProgress) => void;
  /** Told of every unexpected error, without the payload that led to it. */
  readonly onFault: (method: string, error: unknown) => void;
}

/** One call as it came in: nothing of it is trusted. */
export interface Call {
  readonly id: unknown;
  readonly method: unknown;
  readonly takes: unknown;
  /** Whether the shell found that it came from our own window. */
  readonly authorised: boolean;
}

type Anything = Answer<unknown>;

const known: ReadonlySet<unknown> = new Set(methods);

/**
 * The server half of one window. Every call of every shell passes through `call`: authorised, known,
 * parsed, answered; what goes wrong becomes a refusal that the window shows, never an exception.
 */
export class Line {
  readonly #options: LineOptions;
  readonly #running = new Map<number, AbortController>();
  #open = true;

  constructor(options: LineOptions) {
    this.#options = options;
  }

  async call({ id, method, takes, authorised }: Call): Promise<Anything> {
    if (!authorised || !this.#open) return refusals.notAuthorised;
    if (!isMethod(method)) return refusals.unknownMethod;
    if (!isId(id) || this.#running.has(id)) return refusals.malformed('id');
    if (this.#running.size >= limits.running) return refusals.tooMany;
    const parsed = parse(method, takes);
    if ('refused' in parsed) return parsed;
    return this.#run(id, method, parsed.value);
  }

  /** Asks a running call to stop; one that is over, or never was, is let go. */
  cancel(id: unknown): void {
    if (isId(id)) this.#running.get(id)?.abort();
  }

  /** The window is gone: what it asked for is stopped, and nothing more is answered. */
  hangUp(): void {
    this.#open = false;
    for (const stop of this.#running.values()) stop.abort();
  }

  async #run(id: number, method: Method, takes: unknown): Promise<Anything> {
    const stop = new AbortController();
    this.#running.set(id, stop);
    const context: CallContext = {
      signal: stop.signal,
      onProgress: (progress) => {
        if (this.#running.get(id) === stop) this.#options.onProgress(id, progress);
      },
    };
    try {
      // The schema of this very method gave `takes`: see payloads.ts.
      const handler = this.#options.handlers[method] as (
        takes: unknown,
        context: CallContext,
      ) => Promise<Anything>;
      return await handler(takes, context);
    } catch (error) {
      if (stop.signal.aborted && isAbort(error)) return refusals.cancelled;
      this.#options.onFault(method, error);
      return refusals.fault;
    } finally {
      this.#running.delete(id);
    }
  }
}

function isMethod(method: unknown): method is Method {
  return known.has(method);
}

function isId(id: unknown): id is number {
  return typeof id === 'number' && Number.isSafeInteger(id) && id >= 0;
}

function isAbort(error: unknown): boolean {
  return error instanceof Error && error.name === 'AbortError';
}

function parse(method: Method, takes: unknown): Anything {
  const result = v.safeParse(payloads[method], takes, { abortEarly: true });
  if (result.success) return { value: result.output };
  const [issue] = result.issues;
  // The place alone: the value may be a stretch of a transcript. Deeper keys can be typed by people
  // as well (names of attributes), so only the first is said.
  const keys = (issue.path ?? []).map((item) => item.key);
  if (keys.at(-1) === 'bytes' && issue.type === 'check') return refusals.tooLarge;
  return refusals.malformed(
    Object.hasOwn(fieldsOf(method), String(keys[0])) ? String(keys[0]) : '',
  );
}

function fieldsOf(method: Method): object {
  const schema: object = payloads[method];
  return 'entries' in schema && typeof schema.entries === 'object' && schema.entries !== null
    ? schema.entries
    : {};
}
