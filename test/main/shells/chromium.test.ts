import { mkdtemp, rm } from 'node:fs/promises';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startLoopback, type Loopback } from '../../../main/shells/loopback-server.ts';
import { placesOfApp, studiesFolder } from '../../../main/shells/places.ts';
import { recentPaths } from '../../../main/shells/recent-paths.ts';
import { StaticFiles } from '../../../main/shells/static-files.ts';
import { createSession } from '../../../main/window/session.ts';
import type { Session } from '../../../main/window/session-types.ts';
import { launchChromium } from '../../browser/chromium.ts';

describe('the built window in a browser', () => {
  let home = '';
  let browser: Browser;
  let session: Session;
  let shell: Loopback;
  const faults: unknown[][] = [];

  beforeAll(async () => {
    home = await mkdtemp(join(tmpdir(), 'understory-'));
    const places = placesOfApp();
    session = createSession({
      about: {
        version: '0',
        shell: 'browser',
        dialogs: false,
        studiesFolder: studiesFolder(home),
        platform: process.platform,
        locale: 'en',
      },
      dialogs: null,
      recent: recentPaths(join(home, 'recent.json')),
      demoFolder: places.demo,
      now: () => new Date().toISOString(),
      readerName: 'Ada',
    });
    shell = await startLoopback({
      session,
      files: new StaticFiles(places.window, { '/favicon.ico': places.favicon }),
      onFault: (...fault) => void faults.push(fault),
    });
    browser = await launchChromium();
  });
  afterAll(async () => {
    await browser.close();
    await shell.close();
    await session.close();
    await rm(home, { recursive: true });
  });

  /** A page that notes what it complains of, violations of the policy among it. */
  async function newPage(): Promise<{ readonly page: Page; readonly complaints: string[] }> {
    const context = await browser.newContext();
    const page = await context.newPage();
    const complaints: string[] = [];
    page.on('console', (message) => {
      if (message.type() === 'error' || message.type() === 'warning') {
        complaints.push(message.text());
      }
    });
    page.on('pageerror', (error) => complaints.push(String(error)));
    return { page, complaints };
  }
  const text = (page: Page): Promise<string> => page.innerText('#app');

  it('shows itself under its policy without a complaint, isolated, its token gone', async () => {
    const { page, complaints } = await newPage();
    await page.goto(shell.newAddress());
    await page.waitForFunction(() => document.querySelector('#app')?.textContent?.trim());
    expect(page.url()).toBe(`${shell.origin}/`);
    expect(await page.evaluate(() => globalThis.crossOriginIsolated)).toBe(true);
    expect(shell.windows()).toBe(1);
    expect(complaints).toEqual([]);
    await page.context().close();
  });

  it('goes on after it is loaded anew; another tab gets nothing', async () => {
    const { page } = await newPage();
    await page.goto(shell.newAddress());
    await page.waitForFunction(() => document.querySelector('#app')?.textContent?.trim());
    const before = await text(page);
    await page.reload();
    await page.waitForFunction(() => document.querySelector('#app')?.textContent?.trim());
    await expect.poll(() => text(page)).toBe(before);
    await expect.poll(() => shell.windows()).toBe(1);
    const other = await page.context().newPage();
    await other.goto(`${shell.origin}/`);
    expect(await other.evaluate(() => sessionStorage.length)).toBe(0);
    expect(shell.windows()).toBe(1);
    await page.context().close();
  });

  it('is out of reach of a page from elsewhere, though that knows the port', async () => {
    const elsewhere = createServer((_request, response) => {
      response.setHeader('Content-Type', 'text/html');
      response.end('<!doctype html><title>Elsewhere</title>');
    });
    await new Promise<void>((resolve) => elsewhere.listen(0, '127.0.0.1', resolve));
    const { page } = await newPage();
    await page.goto(`http://127.0.0.1:${(elsewhere.address() as AddressInfo).port}/`);
    const token = shell.newAddress().split('#')[1];
    const got = await page.evaluate(
      async ([origin, stolen]) => {
        const outcome = (promise: Promise<unknown>): Promise<string> =>
          promise.then(
            (value) => `got ${String(value)}`,
            () => 'nothing',
          );
        const socket = (protocols: string[]): Promise<unknown> =>
          new Promise((resolve, reject) => {
            const opened = new WebSocket(`${origin.replace('http', 'ws')}/link`, protocols);
            opened.onopen = () => resolve('a socket');
            opened.onerror = reject;
          });
        const loaded = (tag: 'script' | 'img' | 'iframe', path: string): Promise<unknown> =>
          new Promise((resolve, reject) => {
            const element = document.createElement(tag);
            element.onload = () => resolve(tag);
            element.onerror = reject;
            element.src = `${origin}${path}`;
            document.body.append(element);
          });
        return {
          page: await outcome(fetch(`${origin}/`).then((response) => response.text())),
          exchange: await outcome(
            fetch(`${origin}/session`, { method: 'POST', body: stolen }).then((response) =>
              response.text(),
            ),
          ),
          socket: await outcome(socket(['understory.1', `understory.secret.${stolen}`])),
          script: await outcome(loaded('script', '/index.html')),
        };
      },
      [shell.origin, token] as const,
    );
    expect(got).toEqual({
      page: 'nothing',
      exchange: 'nothing',
      socket: 'nothing',
      script: 'nothing',
    });
    elsewhere.close();
    await page.context().close();
    expect(shell.windows()).toBe(0);
    expect(faults).toEqual([]);
  });
});
