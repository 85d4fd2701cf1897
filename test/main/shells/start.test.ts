import { spawn, type ChildProcessWithoutNullStreams } from 'node:child_process';
import { chmod, mkdir, mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { delimiter, join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import {
  canBeFetched,
  electronBinary,
  failedToday,
  fetchElectron,
} from '../../../main/shells/electron-binary.mjs';
import { startOptions } from '../../../main/shells/start-options.mjs';

const top = join(import.meta.dirname, '..', '..', '..');
let folder = '';
beforeEach(async () => {
  folder = await mkdtemp(join(tmpdir(), 'understory-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

describe('what stands after npm start --', () => {
  const usual = { study: null, open: true, port: 0, browser: false, help: false };

  it('is nothing, or a study, meant from where the person stands', () => {
    expect(startOptions([], '/home/ada')).toEqual(usual);
    expect(startOptions(['a b.understory'], '/home/ada')).toEqual({
      ...usual,
      study: join('/home/ada', 'a b.understory'),
    });
    expect(startOptions(['/s/a.understory'], '/home/ada')).toMatchObject({
      study: '/s/a.understory',
    });
  });

  it('may ask for a browser window, for its address alone, for a port', () => {
    expect(startOptions(['--browser'], '/')).toEqual({ ...usual, browser: true });
    expect(startOptions(['--no-open'], '/')).toEqual({ ...usual, browser: true, open: false });
    expect(startOptions(['--port', '4100'], '/')).toEqual({
      ...usual,
      browser: true,
      port: 4100,
    });
    expect(startOptions(['-h'], '/')).toMatchObject({ help: true });
  });

  it.each([
    [['--port']],
    [['--port', 'x']],
    [['--port', '70000']],
    [['--port', '-1']],
    [['--prot', '1']],
    [['a.understory', 'b.understory']],
  ])('is refused in words where it is wrong: %j', (words) => {
    expect(startOptions(words, '/')).toHaveProperty('wrong');
  });
});

describe('fetching Electron', () => {
  const installer = (code: string): Promise<void> => writeFile(join(folder, 'install.js'), code);
  const options = () => ({ from: folder, note: join(folder, 'cache', 'note') });

  it('is there afterwards where the installer put it', async () => {
    expect(electronBinary(folder)).toBeNull();
    await installer(`
      const { mkdirSync, writeFileSync } = require('node:fs');
      mkdirSync(__dirname + '/dist');
      writeFileSync(__dirname + '/dist/electron', '');
      writeFileSync(__dirname + '/path.txt', 'electron');`);
    expect(await fetchElectron(options())).toBe('there');
    expect(electronBinary(folder)).toBe(join(folder, 'dist', 'electron'));
    expect(failedToday(options().note)).toBe(false);
  });

  it('is not tried again on the day that it failed', async () => {
    await installer('process.exit(1)');
    expect(failedToday(options().note)).toBe(false);
    expect(await fetchElectron(options())).toBe('not there');
    expect(failedToday(options().note)).toBe(true);
    await writeFile(options().note, '2001-01-01');
    expect(failedToday(options().note)).toBe(false);
  });

  it('has failed where the installer says it went well and left nothing', async () => {
    await installer('');
    expect(await fetchElectron(options())).toBe('not there');
  });

  it('is given up after its time', async () => {
    await installer('setInterval(() => undefined, 1000)');
    expect(await fetchElectron({ ...options(), ms: 300 })).toBe('not there');
  });

  it('is left alone where its folder is missing, or somebody else’s', async () => {
    expect(canBeFetched(join(folder, 'missing'))).toBe(false);
    expect(canBeFetched(folder)).toBe(false);
    await installer('');
    expect(canBeFetched(folder)).toBe(true);
  });
});

// Signals end a program differently there.
describe.skipIf(process.platform === 'win32')('npm start', () => {
  const running: ChildProcessWithoutNullStreams[] = [];
  afterEach(() => {
    for (const child of running.splice(0)) child.kill('SIGKILL');
  });

  function start(words: readonly string[], environment: Record<string, string> = {}) {
    const child = spawn(process.execPath, [join(top, 'main/shells/start.mjs'), ...words], {
      cwd: top,
      env: {
        ...process.env,
        DISPLAY: '',
        WAYLAND_DISPLAY: '',
        HOME: folder,
        XDG_CONFIG_HOME: join(folder, 'config'),
        ...environment,
      },
    });
    running.push(child);
    const said = { out: '', err: '' };
    child.stdout.on('data', (text) => (said.out += String(text)));
    child.stderr.on('data', (text) => (said.err += String(text)));
    const ended = new Promise<number | null>((resolve) => child.once('exit', resolve));
    return { child, said, ended };
  }
  const waiting = { timeout: 60_000, interval: 50 };
  const address = /^ {2}(http:\/\/127\.0\.0\.1:\d+\/#[\w-]{43})$/mu;

  it('without a display says so, prints an address that works, and ends well on Ctrl-C', async () => {
    const { child, said, ended } = start([]);
    await vi.waitFor(() => expect(said.out).toContain('Press Enter'), waiting);
    expect(said.out).toContain('There is no display here');
    const url = new URL(address.exec(said.out)?.[1] ?? '');
    expect(await (await fetch(url.origin)).text()).toContain('<title>Understory</title>');
    expect(url.hash).toHaveLength(44);
    child.stdin.write('\n');
    await vi.waitFor(
      () => expect(said.out.match(new RegExp(address, 'gmu'))).toHaveLength(2),
      waiting,
    );
    child.kill('SIGINT');
    expect(await ended).toBe(0);
    expect(said.err.replace(/^Building once.*\n/u, '')).toBe('');
  });

  it('says where a study cannot be opened, and waits all the same', async () => {
    const { child, said, ended } = start(['--no-open', 'missing.understory'], { INIT_CWD: folder });
    await vi.waitFor(() => expect(said.out).toContain('Press Enter'), waiting);
    expect(said.out.split('\n')[0]).toContain('missing');
    child.kill('SIGTERM');
    expect(await ended).toBe(0);
  });

  it('hands its address to the system’s opener where there is a display, and to nobody else', async () => {
    const bin = join(folder, 'bin');
    await mkdir(bin);
    const opener = join(bin, 'xdg-open');
    await writeFile(opener, `#!/bin/sh\necho "$@" > "${folder}/opened"\nexit 3\n`);
    await chmod(opener, 0o755);
    const { child, said, ended } = start(['--browser'], {
      DISPLAY: ':9999',
      PATH: `${bin}${delimiter}${process.env['PATH']}`,
    });
    await vi.waitFor(() => expect(said.out).toContain('Press Enter'), waiting);
    const opened = (await readFile(join(folder, 'opened'), 'utf8')).trim();
    // The opener failed: the address is printed for the person to open.
    expect(address.exec(said.out)?.[1]).toBe(opened);
    child.kill('SIGINT');
    expect(await ended).toBe(0);
  });

  it.runIf(process.getuid?.() === 0)(
    'as root does without Electron and fetches nothing',
    async () => {
      const { child, said, ended } = start([], { DISPLAY: ':9999', PATH: '/nowhere' });
      await vi.waitFor(() => expect(said.out).toContain('Press Enter'), waiting);
      expect(said.out).toContain('The administrator’s account');
      expect(said.out).not.toContain('fetching');
      child.kill('SIGINT');
      expect(await ended).toBe(0);
    },
  );

  it('explains its options, and refuses others', async () => {
    const help = start(['--help']);
    expect(await help.ended).toBe(0);
    expect(help.said.out).toContain('--no-open');
    const wrong = start(['--sandbox']);
    expect(await wrong.ended).toBe(2);
    expect(wrong.said.err).toContain('“--sandbox”');
  });

  it('says so where the port is in use', async () => {
    const first = start(['--no-open']);
    await vi.waitFor(() => expect(first.said.out).toContain('Press Enter'), waiting);
    const { port } = new URL(address.exec(first.said.out)?.[1] ?? '');
    const second = start(['--no-open', '--port', port]);
    expect(await second.ended).toBe(1);
    expect(second.said.err).toContain(`Port ${port} is in use`);
  });
});
