import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import { WebSocket as NodeSocket } from 'ws';
import { methods, type FitProgress } from '../../../main/api.ts';
import { startLoopback, type Loopback } from '../../../main/shells/loopback-server.ts';
import { StaticFiles } from '../../../main/shells/static-files.ts';
import { connect, type Bridge, type Connection, type Page } from '../../../renderer/link.ts';
import { fakeSession, overview, type FakeSession } from '../link/fake-session.ts';

const point: FitProgress = { sweep: 1, bound: -3.5, change: 0.5, fraction: 0.1 };

/** A fit that reports one point and ends when it is stopped. */
const fit: Parameters<typeof fakeSession>[0] = {
  overview: async () => ({ value: overview }),
  strata: async () => ({ value: { shares: Float32Array.of(0.25, 0.75) } }),
  fit: (_takes, { onProgress, signal }) =>
    new Promise((resolve) => {
      onProgress(point);
      signal.addEventListener('abort', () => resolve({ refused: 'Stopped.', code: 'stopped' }));
    }),
};
const refit = { kind: 're-fit', themes: null } as const;

describe('the link over the loopback shell', () => {
  let folder = '';
  let shell: Loopback;
  let session: FakeSession;
  let kept: Map<string, string>;
  /** The sockets of this test's links: those of earlier ones may still try again. */
  let opened: NodeSocket[] = [];

  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), 'understory-'));
    await writeFile(join(folder, 'index.html'), '');
    session = fakeSession(fit);
    kept = new Map();
    opened = [];
    shell = await start(0);
  });
  afterEach(async () => {
    await shell.close();
    await rm(folder, { recursive: true });
  });

  const start = (port: number): Promise<Loopback> =>
    startLoopback({ session, files: new StaticFiles(folder), onFault: () => undefined, port });

  /** What a browser's tab gives to the page: its address and what it keeps. */
  function tab(address: string): Page {
    const url = new URL(address);
    const { origin } = shell;
    const sockets = opened;
    class Socket extends NodeSocket {
      constructor(target: string, protocols: string[]) {
        super(target, protocols, { origin });
        sockets.push(this);
        this.on('error', () => undefined);
      }
    }
    return {
      location: url,
      storage: {
        getItem: (key) => kept.get(key) ?? null,
        setItem: (key, value) => void kept.set(key, value),
        removeItem: (key) => void kept.delete(key),
      },
      clearHash: () => void (url.hash = ''),
      fetch: (path, options = {}) =>
        fetch(new URL(String(path), origin), {
          ...options,
          headers: { origin, 'sec-fetch-site': 'same-origin' },
        }),
      WebSocket: Socket as unknown as typeof WebSocket,
    };
  }

  it('calls and is answered; arrays of numbers arrive as such', async () => {
    const link = connect(tab(shell.newAddress()));
    expect(await link.call('overview', null)).toEqual({ value: overview });
    const strata = await link.call('strata', null);
    expect(strata).toEqual({ value: { shares: Float32Array.of(0.25, 0.75) } });
    expect(link.connection).toEqual({ state: 'open', sentence: null });
  });

  it('takes the token out of the address, and keeps the secret for this tab', async () => {
    const page = tab(shell.newAddress());
    const token = page.location.hash.slice(1);
    await connect(page).call('overview', null);
    expect(page.location.hash).toBe('');
    expect([...kept.values()]).toHaveLength(1);
    expect([...kept.values()].join()).not.toContain(token);
  });

  it('goes on after the page is loaded anew', async () => {
    await connect(tab(shell.newAddress())).call('overview', null);
    const again = connect(tab(`${shell.origin}/`));
    expect(await again.call('overview', null)).toEqual({ value: overview });
  });

  it('says what to do where an address is used twice', async () => {
    const address = shell.newAddress();
    await connect(tab(address)).call('overview', null);
    kept.clear();
    const second = connect(tab(address));
    const answer = await second.call('overview', null);
    expect(answer).toMatchObject({ code: 'no connection' });
    expect(JSON.stringify(answer)).toContain('Press Enter in the terminal');
    expect(second.connection.state).toBe('ended');
  });

  it('reports progress to its own call, and cancels', async () => {
    const link = connect(tab(shell.newAddress()));
    const points: FitProgress[] = [];
    const stop = new AbortController();
    const answer = link.call('fit', refit, {
      onProgress: (heard) => points.push(heard),
      signal: stop.signal,
    });
    await vi.waitFor(() => expect(points).toEqual([point]));
    expect(await link.call('overview', null)).toEqual({ value: overview });
    stop.abort();
    expect(await answer).toMatchObject({ code: 'stopped' });
    const late = await link.call('fit', refit, { signal: stop.signal });
    expect(late).toMatchObject({ code: 'cancelled' });
  });

  it('tells listeners of events until they leave', async () => {
    const link = connect(tab(shell.newAddress()));
    const heard: unknown[] = [];
    const leave = link.on('changed', (detail) => heard.push(detail));
    await link.call('overview', null);
    session.tell('changed', overview);
    await vi.waitFor(() => expect(heard).toEqual([overview]));
    leave();
    session.tell('changed', overview);
    await link.call('overview', null);
    expect(heard).toHaveLength(1);
  });

  it('mends a lost connection: running calls are refused, later ones answered, listeners caught up', async () => {
    const link = connect(tab(shell.newAddress()));
    const states: Connection['state'][] = [];
    const heard: unknown[] = [];
    link.onConnection(({ state }) => states.push(state));
    link.on('changed', (detail) => heard.push(detail));
    const points: FitProgress[] = [];
    const running = link.call('fit', refit, { onProgress: (heard) => points.push(heard) });
    await vi.waitFor(() => expect(points).toHaveLength(1));
    opened[0].terminate();
    expect(await running).toMatchObject({ code: 'no connection' });
    await vi.waitFor(() => expect(link.connection.state).toBe('open'));
    expect(states).toEqual(['open', 'lost', 'open']);
    expect(await link.call('overview', null)).toEqual({ value: overview });
    await vi.waitFor(() => expect(heard).toEqual([overview]));
  });

  it('says so when Understory is stopped, and does not try again', async () => {
    const link = connect(tab(shell.newAddress()));
    await link.call('overview', null);
    await shell.close();
    await vi.waitFor(() => expect(link.connection.state).toBe('ended'));
    expect(await link.call('overview', null)).toMatchObject({ code: 'no connection' });
    expect(opened).toHaveLength(1);
  });

  it('begins anew where a message cannot be read', async () => {
    const link = connect(tab(shell.newAddress()));
    await link.call('overview', null);
    opened[0].emit('message', Buffer.of(0xc1), true);
    await vi.waitFor(() => expect(opened).toHaveLength(2));
    await vi.waitFor(() => expect(link.connection.state).toBe('open'));
  });
});

describe('the link over Electron’s bridge', () => {
  function bridged(answer: (id: number, takes: unknown) => Promise<unknown>) {
    const cancelled: number[] = [];
    let progress: (id: number, point: FitProgress) => void = () => undefined;
    let event: Parameters<Bridge['onEvent']>[0] = () => undefined;
    const bridge: Bridge = {
      calls: Object.fromEntries(methods.map((method) => [method, answer])) as never,
      cancel: (id) => void cancelled.push(id),
      onProgress: (listener) => (progress = listener),
      onEvent: (listener) => (event = listener),
    };
    const link = connect({ understory: bridge } as Page);
    return {
      link,
      cancelled,
      progress: (id: number) => progress(id, point),
      event: (...heard: Parameters<typeof event>) => event(...heard),
    };
  }

  it('calls by name, reports progress by id, cancels and tells of events', async () => {
    let finish: (answer: unknown) => void = () => undefined;
    const { link, cancelled, progress, event } = bridged(
      () => new Promise((resolve) => (finish = resolve)),
    );
    const points: FitProgress[] = [];
    const stop = new AbortController();
    const answer = link.call('fit', refit, {
      signal: stop.signal,
      onProgress: (heard) => points.push(heard),
    });
    progress(1);
    progress(2);
    stop.abort();
    finish({ value: null });
    expect(await answer).toEqual({ value: null });
    progress(1);
    expect(points).toEqual([point]);
    expect(cancelled).toEqual([1]);
    const heard: unknown[] = [];
    link.on('command', (command) => heard.push(command));
    event('command', 'find');
    event('command', 'undo');
    expect(heard).toEqual(['find', 'undo']);
  });

  it('sends plain copies: what cannot be cloned between processes is taken apart', async () => {
    const sent: unknown[] = [];
    const { link } = bridged(async (_id, takes) => {
      sent.push(structuredClone(takes));
      return { value: null };
    });
    const bytes = Uint8Array.of(1, 2);
    const files = new Proxy([new Proxy({ name: 'a', bytes }, {})], {});
    await link.call('addTranscripts', new Proxy({ files }, {}));
    expect(sent).toEqual([{ files: [{ name: 'a', bytes }] }]);
  });

  it('turns an answer that does not arrive into a refusal', async () => {
    const { link } = bridged(() => Promise.reject(new Error('could not be cloned')));
    expect(await link.call('overview', null)).toMatchObject({ code: 'fault' });
  });
});
