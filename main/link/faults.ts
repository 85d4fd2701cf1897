import { appendFile, mkdir } from 'node:fs/promises';
import { dirname } from 'node:path';

/**
 * One line on an unexpected error: time, where, the error's kind and the places in the code. Its
 * message is left out, because it may quote a transcript, and so are payloads.
 */
export function faultLine(at: string, where: string, error: unknown): string {
  return `${at} ${where}: ${kindOf(error)}${placesIn(error)}\n`;
}

function kindOf(error: unknown): string {
  if (!(error instanceof Error)) return typeof error;
  // A name or code that somebody set to free text is not repeated.
  const plain = (text: unknown): text is string =>
    typeof text === 'string' && /^[A-Za-z_]{1,40}$/u.test(text);
  const code = (error as { readonly code?: unknown }).code;
  return [error.name, code].filter(plain).join(' ') || 'Error';
}

function placesIn(error: unknown): string {
  if (!(error instanceof Error) || typeof error.stack !== 'string') return '';
  // The stack begins with kind and message, which may itself hold lines that look like places. Where
  // it cannot be told apart, nothing is taken.
  const { message, stack } = error;
  const kind = /^[\w$. [\]-]{1,80}/u.exec(stack)?.[0] ?? '';
  const head = message === '' ? kind : `${kind}: ${message}`;
  const rest = stack.startsWith(`${head}\n`) ? stack.slice(head.length) : '';
  const places = rest
    .split('\n')
    .map((line) =>
      /^\s+at (?:([\w.#<>[\] ]+) )?\(?(?:[^()]*[\\/])?([\w.@-]+:\d+:\d+)\)?$/u.exec(line),
    )
    .filter((found) => found !== null)
    .map(([, name, place]) => (name === undefined ? place : `${name} ${place}`));
  return places.length === 0 ? '' : ` at ${places.slice(0, 12).join(', ')}`;
}

/** Appends to a log that only its owner can read; a log that cannot be written is let go. */
export function faultLog(
  path: string,
  now: () => string,
): (where: string, error: unknown) => Promise<void> {
  return async (where, error) => {
    try {
      await mkdir(dirname(path), { recursive: true, mode: 0o700 });
      await appendFile(path, faultLine(now(), where, error), { mode: 0o600 });
    } catch {
      // Nothing may fail because the log did.
    }
  };
}
