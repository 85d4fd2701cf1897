import { mkdtemp, mkdir, rm, symlink, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { StaticFiles, securityHeaders } from '../../../main/shells/static-files.ts';

let folder = '';
let files: StaticFiles;

beforeAll(async () => {
  folder = await mkdtemp(join(tmpdir(), 'understory-'));
  await mkdir(join(folder, 'window', 'assets', 'deep'), { recursive: true });
  await writeFile(join(folder, 'window', 'index.html'), 'index');
  await writeFile(join(folder, 'window', 'assets', 'x.css'), 'css');
  await writeFile(join(folder, 'window', 'assets', 'deep', 'ä 1.woff2'), 'font');
  await writeFile(join(folder, 'window', 'assets', 'x.unknown'), 'bytes');
  await writeFile(join(folder, 'outside.txt'), 'outside');
  await symlink(join(folder, 'outside.txt'), join(folder, 'window', 'linked.txt'));
  files = new StaticFiles(join(folder, 'window'));
});
afterAll(() => rm(folder, { recursive: true }));

const text = async (target: string): Promise<string> =>
  new TextDecoder().decode((await files.answer(target)).body);

describe('static files', () => {
  it('gives files by their path, the page at the top, each with its kind', async () => {
    expect(await text('/')).toBe('index');
    expect(await text('/?x=1#y')).toBe('index');
    expect(await files.answer('/assets/x.css')).toMatchObject({
      status: 200,
      contentType: 'text/css; charset=utf-8',
    });
    expect(await files.answer('/assets/deep/%C3%A4%201.woff2')).toMatchObject({
      status: 200,
      contentType: 'font/woff2',
    });
    expect((await files.answer('/assets/x.unknown')).contentType).toBe('application/octet-stream');
  });

  it('gives nothing else: other folders, folders, links, other letters', async () => {
    const targets = [
      '/../outside.txt',
      '/assets/../../outside.txt',
      '/%2e%2e/outside.txt',
      '/linked.txt',
      '/assets',
      '/assets/',
      '//index.html',
      '/./index.html',
      '/Index.html',
      '/__proto__',
      '',
      'index.html',
      '\\..\\outside.txt',
    ];
    for (const target of targets) {
      expect((await files.answer(target)).status, target).toBe(404);
    }
  });

  it('refuses malformed escapes', async () => {
    for (const target of ['/%', '/%g1', '/%c3%28', '/a%']) {
      expect((await files.answer(target)).status, target).toBe(400);
    }
  });
});

describe('the headers of every answer', () => {
  it('allow a page nothing but its own files', () => {
    const policy = securityHeaders()['Content-Security-Policy'].split('; ');
    expect(policy[0]).toBe("default-src 'none'");
    for (const directive of policy.slice(1)) {
      expect(directive).toMatch(
        /^(?:[a-z-]+-src 'self'|base-uri 'none'|form-action 'none'|frame-ancestors 'none'|require-trusted-types-for 'script'|trusted-types svelte-trusted-html)$/u,
      );
    }
  });
});
