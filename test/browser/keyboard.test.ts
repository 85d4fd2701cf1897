import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { startApp, type RunningApp } from './app.ts';
import { launchChromium } from './chromium.ts';

// The whole main job without a pointer: every control is reached by Tab, and the focus is never lost.

const demo = join(import.meta.dirname, '..', '..', 'resources', 'demo');
const files = ['P01 ferry clerk.txt', 'P02 crofter.txt', 'P04 teacher.txt'].map((name) =>
  join(demo, name),
);
const home = mkdtempSync(join(tmpdir(), 'understory-keys-'));
let app: RunningApp;
let browser: Browser;
let page: Page;

beforeAll(async () => {
  app = await startApp({ home });
  browser = await launchChromium();
  page = await browser.newPage({
    viewport: { width: 1280, height: 800 },
    reducedMotion: 'reduce',
  });
  page.setDefaultTimeout(30_000);
  await page.goto(await app.address());
});

afterAll(async () => {
  await browser?.close();
  await app?.stop();
  rmSync(home, { recursive: true, force: true });
});

/** What has the focus: its label, else its text. */
const focused = (): Promise<string> =>
  page.evaluate(() => {
    const element = document.activeElement;
    if (element === null || element === document.body) return '';
    const label = element.getAttribute('aria-label') ?? (element as HTMLElement).innerText;
    return label.replace(/\s+/gu, ' ').trim().slice(0, 80);
  });

/** Goes on with Tab until a control has the focus; fails where none of that name can be reached. */
async function tabTo(name: RegExp, key: 'Tab' | 'Shift+Tab' = 'Tab'): Promise<void> {
  await page.getByRole('button', { name }).first().waitFor();
  const passed: string[] = [];
  for (let steps = 0; steps < 150; steps++) {
    const here = await focused();
    if (name.test(here)) return;
    passed.push(here);
    await page.keyboard.press(key);
  }
  throw new Error(`tabTo: ${String(name)} was not reached; passed ${passed.join(' | ')}`);
}

async function choose(name: RegExp, key: 'Tab' | 'Shift+Tab' = 'Tab'): Promise<void> {
  await tabTo(name, key);
  await page.keyboard.press('Enter');
}

const dialogGone = () => page.getByRole('dialog').waitFor({ state: 'detached' });
const hasFocus = () => expect.poll(focused, { timeout: 5000 }).not.toBe('');

it('starts a study and gathers transcripts', async () => {
  await choose(/^Start a study/u);
  await page.getByRole('dialog').waitFor();
  await page.keyboard.type('By keys alone');
  await page.keyboard.press('Enter');
  await page.getByText('Bring in your transcripts').waitFor();
  const chooser = page.waitForEvent('filechooser');
  await choose(/^Add transcripts/u);
  await (await chooser).setFiles(files);
  await page.getByText('3 transcripts', { exact: true }).first().waitFor();
  await hasFocus();
});

it('finds themes', async () => {
  await choose(/^Shape/u);
  await choose(/^Find themes/u);
  await page.getByRole('dialog').waitFor();
  await page.getByLabel('How many themes').waitFor();
  await choose(/^Find themes$/u);
  await page.getByRole('heading', { name: 'Strata' }).waitFor({ timeout: 120_000 });
  await hasFocus();
});

it('reads and decides, with the keys that a person chose', async () => {
  await choose(/^Read( |$)/u, 'Shift+Tab');
  await page.locator('[role=article][aria-current=true]').waitFor();
  await page.locator('[role=article][aria-current=true]:focus').waitFor();
  await page.keyboard.press('?');
  await page.getByRole('dialog', { name: 'Keys in Read' }).waitFor();
  await choose(/^Change keys$/u);
  await page.getByLabel('Key for: read, and none applies').waitFor();
  await page.getByLabel('Key for: read, and none applies').focus();
  await page.keyboard.type('x');
  await page.keyboard.press('Tab');
  await page.keyboard.press('Escape');
  await dialogGone();
  await hasFocus();

  await page.keyboard.press('l');
  await page.getByRole('dialog', { name: 'Reading list' }).waitFor();
  await page.getByRole('radio', { name: /In order/iu }).focus();
  while (!(await page.getByRole('radio', { name: /Strongest first/iu }).isChecked())) {
    await page.keyboard.press('ArrowDown');
  }
  await page.keyboard.press('Enter');
  await dialogGone();
  const inHand = async (place: number): Promise<void> => {
    await page.getByText(new RegExp(`^${place} of \\d+`, 'u')).waitFor();
    await page.locator('[role=article][aria-current=true]:focus').waitFor();
  };
  await inHand(1);
  await page.keyboard.press('Enter');
  await inHand(2);
  await page.keyboard.press('n');
  await inHand(3);
  await page.keyboard.press('o');
  await page.keyboard.press('x');
  await inHand(4);
});

it('names a theme, fits again and saves a report', async () => {
  await choose(/^Shape/u);
  await choose(/^Name it$/u);
  await page.getByRole('dialog').waitFor();
  await page.keyboard.type('Getting there');
  await page.keyboard.press('Enter');
  await dialogGone();
  await hasFocus();
  await choose(/^Re-fit/u, 'Shift+Tab');
  await page.getByRole('heading', { name: 'What moved' }).waitFor({ timeout: 120_000 });
  await choose(/^Keep this fit$/u);
  await dialogGone();
  await hasFocus();
  await choose(/^Report/u, 'Shift+Tab');
  const download = page.waitForEvent('download');
  await choose(/^Save: Table of excerpts$/u);
  const saved = readFileSync(await (await download).path(), 'utf8');
  expect(saved).toContain('confirmed');
});
