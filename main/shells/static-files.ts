import { readdirSync } from 'node:fs';
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';

const contentTypes: Readonly<Record<string, string>> = {
  css: 'text/css; charset=utf-8',
  ico: 'image/x-icon',
  html: 'text/html; charset=utf-8',
  js: 'text/javascript; charset=utf-8',
  json: 'application/json; charset=utf-8',
  png: 'image/png',
  svg: 'image/svg+xml; charset=utf-8',
  txt: 'text/plain; charset=utf-8',
  woff2: 'font/woff2',
};

export interface StaticAnswer {
  readonly status: 200 | 400 | 404;
  readonly contentType: string;
  readonly body: Uint8Array;
}

/**
 * The window's files, for both shells. They are listed once, at the start; a request only chooses
 * among them and never becomes a path, so there is nothing to climb out of.
 */
export class StaticFiles {
  readonly #paths: ReadonlyMap<string, string>;

  /** `more`: files from elsewhere, by the path at which they are asked for. */
  constructor(folder: string, more: Readonly<Record<string, string>> = {}) {
    this.#paths = new Map([
      ...[...filesIn(folder, '')].map((name): [string, string] => [
        `/${name}`,
        join(folder, ...name.split('/')),
      ]),
      ...Object.entries(more),
    ]);
  }

  /** `target` as it stands in a request: path and query, still escaped. */
  async answer(target: string): Promise<StaticAnswer> {
    const path = pathOf(target);
    if (path === null) return plain(400, 'The address is malformed.');
    const file = this.#paths.get(path === '/' ? '/index.html' : path);
    if (file === undefined) return plain(404, 'There is nothing at this address.');
    const ending = file.slice(file.lastIndexOf('.') + 1).toLowerCase();
    const contentType = Object.hasOwn(contentTypes, ending)
      ? contentTypes[ending]
      : 'application/octet-stream';
    return { status: 200, contentType, body: await readFile(file) };
  }
}

function plain(status: 400 | 404, text: string): StaticAnswer {
  return { status, contentType: contentTypes['txt'], body: new TextEncoder().encode(text) };
}

function pathOf(target: string): string | null {
  try {
    return decodeURIComponent(target.replace(/[?#].*$/su, ''));
  } catch {
    return null;
  }
}

// Not `recursive: true`: inside a packaged archive folders can only be read one by one.
function* filesIn(folder: string, before: string): Generator<string> {
  for (const entry of readdirSync(folder, { withFileTypes: true })) {
    const name = `${before}${entry.name}`;
    if (entry.isDirectory()) yield* filesIn(join(folder, entry.name), `${name}/`);
    else if (entry.isFile()) yield name;
  }
}

/**
 * What every answer to a window carries. `connect` names where the page may connect to besides its
 * own origin.
 */
export function securityHeaders(connect: readonly string[] = []): Record<string, string> {
  return {
    'Content-Security-Policy': [
      "default-src 'none'",
      "script-src 'self'",
      "style-src 'self'",
      "font-src 'self'",
      "img-src 'self'",
      `connect-src ${["'self'", ...connect].join(' ')}`,
      "base-uri 'none'",
      "form-action 'none'",
      "frame-ancestors 'none'",
      // Text of transcripts can never become markup by mistake: only Svelte's own templates do.
      "require-trusted-types-for 'script'",
      'trusted-types svelte-trusted-html',
    ].join('; '),
    // Alone in its process, and out of reach of whatever opened it.
    'Cross-Origin-Opener-Policy': 'same-origin',
    'Cross-Origin-Embedder-Policy': 'require-corp',
    'Cross-Origin-Resource-Policy': 'same-origin',
    'Permissions-Policy':
      'camera=(), microphone=(), geolocation=(), display-capture=(), usb=(), serial=(), hid=()',
    'Referrer-Policy': 'no-referrer',
    'X-Content-Type-Options': 'nosniff',
    'X-DNS-Prefetch-Control': 'off',
    'X-Frame-Options': 'DENY',
    'Cache-Control': 'no-store',
  };
}
