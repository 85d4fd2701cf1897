import { mkdtemp, mkdir, rm, writeFile } from 'node:fs/promises';
import { request } from 'node:http';
import { connect } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { WebSocket } from 'ws';
import {
  pack,
  secretPrefix,
  unpack,
  wireProtocol,
  type FromWindow,
} from '../../../main/link/index.ts';
import { Admission, tokenLifetime } from '../../../main/shells/admission.ts';
import { startLoopback, type Loopback } from '../../../main/shells/loopback-server.ts';
import { StaticFiles } from '../../../main/shells/static-files.ts';
import { fakeSession, overview, studyWord, type FakeSession } from '../link/fake-session.ts';

let folder = '';
let shell: Loopback;
let session: FakeSession;
let clock = 0;
let faults: unknown[][] = [];
const sockets: WebSocket[] = [];

beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'understory-'));
  await mkdir(join(folder, 'window', 'assets'), { recursive: true });
  await writeFile(join(folder, 'window', 'index.html'), '<!doctype html><title>Understory</title>');
  await writeFile(join(folder, 'window', 'assets', 'a b.js'), 'export {};');
  await writeFile(join(folder, 'secret.txt'), studyWord);
  clock = 0;
  faults = [];
  session = fakeSession({ overview: async () => ({ value: overview }) });
  shell = await startLoopback({
    session,
    files: new StaticFiles(join(folder, 'window')),
    onFault: (...fault) => void faults.push(fault),
    admission: new Admission(() => clock),
    messageBytes: 10_000,
  });
});

afterEach(async () => {
  for (const socket of sockets.splice(0)) socket.terminate();
  await shell.close();
  await rm(folder, { recursive: true });
  expect(faults).toEqual([]);
});

interface Got {
  readonly status: number;
  readonly headers: Record<string, string | string[] | undefined>;
  readonly body: string;
}

function ask(
  path: string,
  {
    method = 'GET',
    headers = {},
    body = '',
  }: { method?: string; headers?: Record<string, string>; body?: string } = {},
): Promise<Got> {
  return new Promise((resolve, reject) => {
    const sent = request(
      { host: '127.0.0.1', port: shell.port, path, method, headers },
      (response) => {
        let text = '';
        response.setEncoding('utf8');
        response.on('data', (part: string) => (text += part));
        response.on('end', () =>
          resolve({ status: response.statusCode ?? 0, headers: response.headers, body: text }),
        );
      },
    );
    sent.on('error', reject);
    sent.end(body);
  });
}

const newToken = (): string => shell.newAddress().split('#')[1];
const exchange = (token: string, headers: Record<string, string> = {}): Promise<Got> =>
  ask('/session', { method: 'POST', headers: { origin: shell.origin, ...headers }, body: token });
const newSecret = async (): Promise<string> => (await exchange(newToken())).body;

interface Attempt {
  readonly secret?: string;
  readonly protocols?: string[];
  readonly headers?: Record<string, string>;
  readonly path?: string;
}

/** Opens a WebSocket; the socket, or the status with which it was refused. */
function open({
  secret,
  protocols,
  headers,
  path = '/link',
}: Attempt): Promise<WebSocket | number> {
  const offered = protocols ?? [wireProtocol, `${secretPrefix}${secret}`];
  const socket = new WebSocket(`ws://127.0.0.1:${shell.port}${path}`, offered, {
    headers: { origin: shell.origin, ...headers },
  });
  sockets.push(socket);
  return new Promise((resolve) => {
    socket.on('open', () => resolve(socket));
    socket.on('unexpected-response', (_request, response) => resolve(response.statusCode ?? 0));
    socket.on('error', () => resolve(0));
  });
}

async function opened(): Promise<WebSocket> {
  const socket = await open({ secret: await newSecret() });
  if (typeof socket === 'number') throw new Error(`refused with ${socket}`);
  return socket;
}

const nextMessage = (socket: WebSocket): Promise<unknown> =>
  new Promise((resolve) => socket.once('message', (data) => resolve(unpack(data as Buffer))));
const closing = (socket: WebSocket): Promise<number> =>
  new Promise((resolve) => socket.once('close', (code) => resolve(code)));
const send = (socket: WebSocket, message: FromWindow): void => socket.send(pack(message));
const overviewCall: FromWindow = { say: 'call', id: 1, method: 'overview', takes: null };

describe('the loopback shell', () => {
  it('listens on this machine alone', async () => {
    expect(shell.origin).toMatch(/^http:\/\/127\.0\.0\.1:\d+$/u);
    // 127.0.0.2 is this machine too, and reached where all addresses are listened on.
    const other = connect({ host: '127.0.0.2', port: shell.port });
    const result = await new Promise((resolve) => {
      other.once('connect', () => resolve('connected'));
      other.once('error', () => resolve('refused'));
    });
    other.destroy();
    if (process.platform === 'linux') expect(result).toBe('refused');
  });

  it('serves the window with headers that shut it off', async () => {
    const { status, headers, body } = await ask('/');
    expect(status).toBe(200);
    expect(body).toContain('Understory');
    const policy = String(headers['content-security-policy']).split('; ');
    expect(policy).toContain("default-src 'none'");
    expect(policy).toContain("script-src 'self'");
    expect(policy).toContain(`connect-src 'self' ws://127.0.0.1:${shell.port}`);
    expect(policy).toContain("frame-ancestors 'none'");
    expect(policy.join()).not.toMatch(/unsafe|data:|https:|\*/u);
    expect(headers).toMatchObject({
      'cross-origin-opener-policy': 'same-origin',
      'cross-origin-embedder-policy': 'require-corp',
      'cross-origin-resource-policy': 'same-origin',
      'x-content-type-options': 'nosniff',
      'referrer-policy': 'no-referrer',
      'cache-control': 'no-store',
      'content-type': 'text/html; charset=utf-8',
    });
    expect(headers['access-control-allow-origin']).toBeUndefined();
    expect(headers['set-cookie']).toBeUndefined();
    expect((await ask('/assets/a%20b.js')).headers['content-type']).toContain('javascript');
  });

  it('lets a window in with the token of its address, and answers its calls', async () => {
    const socket = await opened();
    expect(socket.protocol).toBe(wireProtocol);
    send(socket, overviewCall);
    expect(await nextMessage(socket)).toEqual({
      say: 'answer',
      id: 1,
      answer: { value: overview },
    });
  });

  it('tells every window of events, and forgets windows that are gone', async () => {
    const [one, two] = [await opened(), await opened()];
    expect(shell.windows()).toBe(2);
    const heard = Promise.all([nextMessage(one), nextMessage(two)]);
    session.tell('changed', overview);
    const message = { say: 'event', event: 'changed', detail: overview };
    expect(await heard).toEqual([message, message]);
    one.close();
    await vi.waitFor(() => expect(shell.windows()).toBe(1));
    session.tell('closed', null);
  });

  it('stops what a window asked for when it is gone', async () => {
    let stopped = false;
    const running = { ...session.handlers };
    Object.assign(session.handlers, {
      ...running,
      fit: (_takes: unknown, { signal }: { signal: AbortSignal }) =>
        new Promise((resolve) => {
          signal.addEventListener('abort', () => {
            stopped = true;
            resolve({ value: null });
          });
        }),
    });
    const socket = await opened();
    send(socket, { say: 'call', id: 1, method: 'fit', takes: { kind: 're-fit', themes: null } });
    send(socket, overviewCall);
    await new Promise((resolve) => setTimeout(resolve, 50));
    socket.terminate();
    await vi.waitFor(() => expect(stopped).toBe(true));
  });

  it('lets go of all windows and listeners when it closes', async () => {
    const socket = await opened();
    const closed = closing(socket);
    await shell.close();
    expect(await closed).toBe(4000);
    expect(session.listeners()).toBe(0);
    await expect(ask('/')).rejects.toThrow();
  });
});

describe('a token', () => {
  it('is of no use twice', async () => {
    const token = newToken();
    expect((await exchange(token)).status).toBe(200);
    const again = await exchange(token);
    expect(again.status).toBe(403);
    expect(again.body).toBe('Not allowed.');
  });

  it('is of no use when it is late, and void when another is made', async () => {
    const late = newToken();
    clock += tokenLifetime + 1;
    expect((await exchange(late)).status).toBe(403);
    const first = newToken();
    const second = newToken();
    expect((await exchange(first)).status).toBe(403);
    expect((await exchange(second)).status).toBe(200);
  });

  it('that is wrong, missing or huge is refused, and leaves the right one good', async () => {
    const token = newToken();
    for (const wrong of ['', 'x', token.slice(1), `${token} `, token.toUpperCase(), '\0']) {
      expect((await exchange(wrong)).status, JSON.stringify(wrong)).toBe(403);
    }
    const huge = await exchange('x'.repeat(50_000)).catch(() => ({ status: 403 }));
    expect(huge.status).toBe(403);
    expect((await exchange(token)).status).toBe(200);
  });

  it('is taken from our own page only', async () => {
    const token = newToken();
    const authority = `127.0.0.1:${shell.port}`;
    const foreign: Record<string, string>[] = [
      { origin: 'http://evil.example' },
      { origin: 'null' },
      { origin: '' },
      { origin: `http://localhost:${shell.port}` },
      { origin: `https://${authority}` },
      { origin: 'http://127.0.0.1:1' },
      { origin: `${shell.origin}.evil.example` },
      { host: 'evil.example' },
      { host: `localhost:${shell.port}` },
      { host: `${authority}.evil.example` },
      { host: '127.0.0.1' },
      { 'sec-fetch-site': 'cross-site', 'sec-fetch-mode': 'cors' },
      { 'sec-fetch-site': 'same-site', 'sec-fetch-mode': 'no-cors' },
    ];
    for (const headers of foreign) {
      expect((await exchange(token, headers)).status, JSON.stringify(headers)).toBe(403);
    }
    const noOrigin = await ask('/session', { method: 'POST', body: token });
    expect(noOrigin.status).toBe(403);
    expect((await exchange(token)).status).toBe(200);
  });
});

describe('a WebSocket', () => {
  it('is refused with 403 without the secret, or with a wrong one', async () => {
    const token = newToken();
    const secret = await newSecret();
    const attempts: Attempt[] = [
      { protocols: [wireProtocol] },
      { protocols: [] },
      { secret: '' },
      { secret: 'wrong' },
      { secret: secret.slice(1) },
      { secret: token },
      { protocols: [`${secretPrefix}${secret}`] },
      { protocols: [secret] },
      { secret, path: '/' },
      { secret, path: '/link?x=1' },
      { secret, path: '/link/' },
      { protocols: [wireProtocol], path: `/link?secret=${secret}` },
    ];
    for (const attempt of attempts) {
      expect(await open(attempt), JSON.stringify(attempt)).toBe(403);
    }
    expect(session.calls).toEqual([]);
  });

  it('is refused with 403 from another page, or under another name, even with the secret', async () => {
    const secret = await newSecret();
    const foreign: Record<string, string>[] = [
      { origin: 'http://evil.example' },
      { origin: 'null' },
      { origin: `http://localhost:${shell.port}` },
      { origin: 'http://127.0.0.1:80' },
      { host: 'evil.example' },
      { host: `rebound.example:${shell.port}` },
      { host: `localhost:${shell.port}` },
    ];
    for (const headers of foreign) {
      expect(await open({ secret, headers }), JSON.stringify(headers)).toBe(403);
    }
    expect(shell.windows()).toBe(0);
    expect(typeof (await open({ secret }))).toBe('object');
  });

  it('without an Origin is refused: every browser sends one', async () => {
    const secret = await newSecret();
    const socket = new WebSocket(`ws://127.0.0.1:${shell.port}/link`, [
      wireProtocol,
      `${secretPrefix}${secret}`,
    ]);
    socket.on('error', () => undefined);
    const status = await new Promise((resolve) => {
      socket.on('unexpected-response', (_request, response) => resolve(response.statusCode));
      socket.on('open', () => resolve('open'));
    });
    socket.terminate();
    expect(status).toBe(403);
  });

  it('is closed by a message that is too large, before it is read', async () => {
    const socket = await opened();
    const closed = closing(socket);
    send(socket, { say: 'call', id: 1, method: 'find', takes: { text: 'x'.repeat(20_000) } });
    expect(await closed).toBe(1009);
    expect(session.calls).toEqual([]);
  });

  it.each<[string, string | Uint8Array]>([
    ['text', '{"say":"call"}'],
    ['bytes that are no message', Uint8Array.of(0xc1)],
    ['nothing', new Uint8Array(0)],
    ['a number', Uint8Array.of(7)],
    ['a map that says nothing', Uint8Array.of(0x80)],
    ['what only the shell says', pack({ say: 'event', event: 'changed', detail: null })],
  ])('is closed by %s', async (_name, message) => {
    const socket = await opened();
    const closed = closing(socket);
    socket.send(message);
    expect(await closed).toBe(1003);
    expect(session.calls).toEqual([]);
  });

  it('gets a refusal for what the api does not know, and stays open', async () => {
    const socket = await opened();
    send(socket, { say: 'call', id: 5, method: '__proto__', takes: null });
    expect(await nextMessage(socket)).toMatchObject({ id: 5, answer: { code: 'unknown method' } });
    send(socket, { say: 'call', id: 6, method: 'nameTheme', takes: { theme: 7 } });
    expect(await nextMessage(socket)).toMatchObject({
      id: 6,
      answer: { code: 'malformed request' },
    });
    send(socket, { say: 'cancel', id: 99 });
    send(socket, overviewCall);
    expect(await nextMessage(socket)).toMatchObject({ id: 1 });
  });
});

describe('a request', () => {
  it('cannot climb out of the window’s files', async () => {
    const paths = [
      '/../secret.txt',
      '/%2e%2e/secret.txt',
      '/..%2fsecret.txt',
      '/assets/../../secret.txt',
      '/assets/..%5c..%5csecret.txt',
      '/%2e%2e%2fsecret.txt',
      '//secret.txt',
      `/${join(folder, 'secret.txt')}`,
      '/index.html%00.txt',
      '/assets',
      '/assets/',
      'http://evil.example/',
      '*',
    ];
    for (const path of paths) {
      const { status, body } = await ask(path);
      expect([400, 403, 404], path).toContain(status);
      expect(body).not.toContain(studyWord);
    }
  });

  it('with malformed escapes is refused and crashes nothing', async () => {
    for (const path of ['/%', '/%zz', '/%E0%A4%A', '/%c0%af%c0%af', '/%ff']) {
      expect((await ask(path)).status, path).toBe(400);
    }
    expect((await ask('/')).status).toBe(200);
  });

  it('under another name, or loaded into another page, is refused', async () => {
    const foreign: Record<string, string>[] = [
      { host: 'rebound.example' },
      { host: `rebound.example:${shell.port}` },
      { 'sec-fetch-site': 'cross-site', 'sec-fetch-mode': 'no-cors' },
      { 'sec-fetch-site': 'same-site', 'sec-fetch-mode': 'cors' },
    ];
    for (const headers of foreign) {
      expect((await ask('/', { headers })).status, JSON.stringify(headers)).toBe(403);
    }
  });

  it('that would change something is refused', async () => {
    for (const method of ['PUT', 'DELETE', 'OPTIONS', 'PATCH', 'POST']) {
      expect((await ask('/', { method })).status, method).toBe(405);
    }
    expect((await ask('/session')).status).toBe(404);
    expect((await ask('/', { method: 'HEAD' })).body).toBe('');
  });

  it('of bytes that are no HTTP ends with its connection', async () => {
    const socket = connect({ host: '127.0.0.1', port: shell.port });
    socket.write('\x16\x03\x01 no request\r\n\r\n');
    await new Promise((resolve) => socket.once('close', resolve).resume());
    expect((await ask('/')).status).toBe(200);
  });

  it('never gets a word of the study without the secret', async () => {
    const answers = await Promise.all(
      ['/', '/link', '/session', '/overview', '/api/overview', '/index.html'].map((path) =>
        ask(path),
      ),
    );
    expect(JSON.stringify(answers)).not.toContain(studyWord);
    expect(session.calls).toEqual([]);
  });
});
