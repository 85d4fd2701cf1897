import { copyFileSync, mkdirSync, mkdtempSync, readdirSync, readFileSync, rmSync } from 'node:fs';
import { existsSync } from 'node:fs';
import { once } from 'node:events';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { WebSocket } from 'ws';
import type { Api, Method } from '../../main/api.ts';
import { pack, secretPrefix, unpack, wireProtocol } from '../../main/link/index.ts';
import { canTrace, networkUse, startTraced } from './traced.ts';

const top = join(import.meta.dirname, '..', '..');
const folders: string[] = [];
afterEach(() => {
  for (const folder of folders.splice(0)) rmSync(folder, { recursive: true, force: true });
});

function newHome(): { home: string; env: NodeJS.ProcessEnv } {
  const home = mkdtempSync(join(tmpdir(), 'understory-traced-'));
  folders.push(home);
  const transcripts = join(home, 'transcripts');
  mkdirSync(transcripts);
  for (const name of readdirSync(join(top, 'resources', 'demo')).slice(0, 4)) {
    copyFileSync(join(top, 'resources', 'demo', name), join(transcripts, name));
  }
  const env = { ...process.env, HOME: home, XDG_CONFIG_HOME: join(home, '.config') };
  return { home, env: { ...env, INIT_CWD: home } };
}

async function finished(child: ReturnType<typeof startTraced>): Promise<string> {
  let text = '';
  child.stdout?.on('data', (piece: Buffer) => (text += piece.toString()));
  child.stderr?.on('data', (piece: Buffer) => (text += piece.toString()));
  await once(child, 'close');
  return text;
}

/** A window of the loopback shell, without a browser. */
async function openWindow(address: string) {
  const [origin = '', token] = address.split('/#');
  const got = await fetch(`${origin}/session`, {
    method: 'POST',
    headers: { origin },
    body: token ?? null,
  });
  const protocols = [wireProtocol, `${secretPrefix}${await got.text()}`];
  const socket = new WebSocket(`${origin.replace('http', 'ws')}/link`, protocols, { origin });
  await once(socket, 'open');
  const waiting = new Map<number, (answer: unknown) => void>();
  socket.on('message', (data: Buffer) => {
    const message = unpack(data) as { say: string; id: number; answer: unknown };
    if (message.say === 'answer') waiting.get(message.id)?.(message.answer);
  });
  let last = 0;
  return {
    call: async <Name extends Method>(method: Name, takes: Api[Name]['takes']) => {
      const id = ++last;
      const answer = new Promise((resolve) => waiting.set(id, resolve));
      socket.send(pack({ say: 'call', id, method, takes }));
      const given = (await answer) as { value: Api[Name]['gives'] } | { refused: string };
      if ('refused' in given) throw new Error(`${method}: ${given.refused}`);
      return given.value;
    },
    close: () => socket.close(),
  };
}

describe('no network', () => {
  if (!canTrace) {
    process.stdout.write('Skipped, because strace cannot be used here: no network.\n');
  }

  it.skipIf(!canTrace)('is seen where there is one: the watch itself', async () => {
    const { home, env } = newHome();
    const server = createServer().listen(0, '127.0.0.1');
    await once(server, 'listening');
    const { port } = server.address() as { port: number };
    const log = join(home, 'log');
    const script = `require('net').connect(${port}, '127.0.0.1', function () { this.destroy(); })`;
    await finished(startTraced(log, ['-e', script], { cwd: home, env }));
    server.close();
    expect(networkUse(log).reached).toHaveLength(1);
  });

  it.skipIf(!canTrace)('is used by the command line: theme, save, export', async () => {
    const { home, env } = newHome();
    const program = join(top, 'main', 'shells', 'understory.mjs');
    const study = join(home, 'a.understory');
    const options = '--themes 2 --seed 1 --out out --save a.understory'.split(' ');
    const first = join(home, 'first');
    const themed = [program, 'theme', 'transcripts', ...options];
    const said = await finished(startTraced(first, themed, { cwd: home, env }));
    expect(existsSync(study), said).toBe(true);
    const second = join(home, 'second');
    const exporting = [program, 'export', study, '--out', 'more.csv', '--include', 'suggested'];
    await finished(startTraced(second, exporting, { cwd: home, env }));
    for (const log of [first, second]) {
      expect(networkUse(log)).toMatchObject({ reached: [], listened: [] });
    }
  });

  it.skipIf(!canTrace)(
    'is used by the window’s whole job but for its own port on this machine',
    async () => {
      const { home, env } = newHome();
      const log = join(home, 'log');
      const start = join(top, 'main', 'shells', 'start.mjs');
      const child = startTraced(log, [start, '--no-open'], { cwd: top, env });
      const ended = once(child, 'close');
      let text = '';
      child.stdout?.on('data', (piece: Buffer) => (text += piece.toString()));
      const address = async (): Promise<string> => {
        for (let tries = 0; tries < 600; tries++) {
          const found = /http:\/\/127\.0\.0\.1:\d+\/\S+/u.exec(text);
          if (found !== null) return found[0];
          await new Promise((resolve) => setTimeout(resolve, 100));
        }
        throw new Error(`no address came: ${text}`);
      };
      try {
        const window = await openWindow(await address());
        await window.call('startStudy', { name: 'Traced', path: null });
        const files = readdirSync(join(home, 'transcripts')).map((name) => ({
          name,
          bytes: Uint8Array.from(readFileSync(join(home, 'transcripts', name))),
        }));
        await window.call('addTranscripts', { files });
        await window.call('changeSettings', { settings: { themes: 2, answer: 'quick' } });
        await window.call('fit', { kind: 'from scratch', themes: null });
        const { themes } = await window.call('shapeView', null);
        await window.call('nameTheme', { theme: themes[0].id, name: 'Crossings' });
        await window.call('find', { text: 'boat' });
        await window.call('makeBackup', null);
        await window.call('closeStudy', null);
        window.close();
      } finally {
        process.kill(-(child.pid ?? 0), 'SIGINT');
        await ended;
      }
      const { reached, listened, calls } = networkUse(log);
      expect(reached).toEqual([]);
      expect(listened).toHaveLength(1);
      expect(listened[0]).toMatch(/^127\.0\.0\.1:\d+$/u);
      expect(calls).toBeGreaterThan(5);
    },
  );
});
