import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { parse } from 'csv-parse/sync';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, expect, it } from 'vitest';
import { startApp, type RunningApp } from './app.ts';
import { launchChromium } from './chromium.ts';

// The whole main job as a person does it, in one study, step by step: each test goes on where the
// one before left off.

const demo = join(import.meta.dirname, '..', '..', 'resources', 'demo');
const files = [
  'P01 ferry clerk.txt',
  'P02 crofter.txt',
  'P04 teacher.txt',
  'P05 guest house.docx',
  'P09 builder.vtt',
  'P12 carer.srt',
].map((name) => join(demo, name));

const home = mkdtempSync(join(tmpdir(), 'understory-job-'));
const faults: string[] = [];
const requests: string[] = [];
let app: RunningApp;
let browser: Browser;
let page: Page;

async function openWindow(): Promise<void> {
  const context = await browser.newContext({
    viewport: { width: 1280, height: 800 },
    reducedMotion: 'reduce',
  });
  page = await context.newPage();
  page.setDefaultTimeout(30_000);
  page.on('pageerror', (error) => faults.push(error.message));
  page.on('request', (request) => requests.push(request.url()));
  await page.goto(await app.address());
}

const button = (name: string | RegExp) => page.getByRole('button', { name });
const go = (name: string) =>
  page.getByRole('navigation', { name: 'Places' }).getByRole('button', { name }).click();
const dialogGone = () => page.getByRole('dialog').waitFor({ state: 'detached' });
/** Waits until the passage at a place of the reading list has the keys. */
const inHand = async (place: number): Promise<void> => {
  await page.getByText(new RegExp(`^${place} of \\d+`, 'u')).waitFor();
  await page.locator('[role=article][aria-current=true]:focus').waitFor();
};

beforeAll(async () => {
  app = await startApp({ home });
  browser = await launchChromium();
  await openWindow();
});

afterAll(async () => {
  await browser?.close();
  await app?.stop();
  rmSync(home, { recursive: true, force: true });
});

it('starts a study and takes in transcripts in four formats', async () => {
  await button('Start a study').click();
  await page.getByLabel('Name of the study').fill('Island winter');
  await button('Start the study').click();
  await page.getByText('Bring in your transcripts').waitFor();
  await page.getByLabel('Transcript files').setInputFiles(files);
  await page.getByText('6 transcripts', { exact: true }).first().waitFor();
  await page.getByText('P05 guest house').first().waitFor();
});

it('takes a table of attributes and says who was not met', async () => {
  await page.getByLabel('Table of attributes').setInputFiles(join(demo, 'attributes.csv'));
  await page
    .getByText(/Old Jory/u)
    .first()
    .waitFor();
});

it('finds themes, with the bound shown and a way to stop', async () => {
  await go('Shape');
  await button('Find themes …').click();
  await page.getByLabel('How many themes').fill('6');
  await page.getByRole('dialog').getByRole('button', { name: 'Find themes' }).click();
  await page.getByRole('heading', { name: 'Strata' }).waitFor({ timeout: 120_000 });
});

it('names, defines, pins, seeds, shuts out, merges, sets aside and adds themes', async () => {
  await page.locator('.list li button').first().click();
  await button('Name it').click();
  await page.getByLabel('Name', { exact: true }).fill('Getting there');
  await button('Save name').click();
  await dialogGone();
  await page.getByRole('heading', { name: 'Getting there' }).waitFor();

  await page.locator('.word').nth(0).click();
  await page.getByRole('menuitem', { name: 'Seed here' }).click();
  await page.locator('.word.seeded').waitFor();
  const shut = (await page.locator('.word').nth(4).innerText()).trim();
  await page.locator('.word').nth(4).click();
  await page.getByRole('menuitem', { name: 'Shut out here' }).click();
  await page.locator('.word.out', { hasText: shut }).waitFor();

  await button(/^More/u).click();
  await page.getByRole('menuitem', { name: 'Merge with another …' }).click();
  await page.getByRole('radio').last().check();
  await button('Merge the two').click();
  await dialogGone();

  await page.locator('.list li button').nth(1).click();
  await button('Name it').waitFor();
  await button(/^More/u).click();
  await page.getByRole('menuitem', { name: /^Set aside/u }).click();
  await page.getByText('Set aside', { exact: true }).waitFor();

  await button('Add a theme').click();
  await page.getByLabel('Name', { exact: true }).fill('Asking favours');
  await page.getByRole('radio', { name: /By hand/u }).check();
  await button('Add the theme').click();
  await dialogGone();
  await page.getByText(/Waiting:/u).waitFor();
});

it('fits again around the decisions and lists what moved', async () => {
  await button('Re-fit').click();
  await page.getByRole('heading', { name: 'What moved' }).waitFor({ timeout: 120_000 });
  await button('Keep this fit').click();
  await dialogGone();
  await page.locator('.list li button', { hasText: 'Getting there' }).click();
  await page.getByRole('heading', { name: 'Getting there' }).waitFor();
  expect(await page.locator('.word.seeded').count()).toBe(1);
  expect(await page.locator('.word.out').count()).toBe(1);
});

it('confirms, rejects, finds none, codes a stretch and writes a memo by keys alone', async () => {
  await go('Read');
  await button(/Reading list/u).click();
  await page.getByRole('radio', { name: /Strongest first/iu }).check();
  await page.getByRole('dialog').getByRole('button', { name: 'Read this list' }).click();
  await dialogGone();
  await inHand(1);
  await page.keyboard.press('Enter');
  await inHand(2);
  await page.keyboard.press('n');
  await inHand(3);
  await page.keyboard.press('o');
  await inHand(4);

  await page.keyboard.press('v');
  await page.keyboard.press('ArrowRight');
  for (let word = 0; word < 4; word++) await page.keyboard.press('Shift+ArrowRight');
  await page.keyboard.press('c');
  await page.getByRole('dialog', { name: 'Code the selection' }).waitFor();
  await page.keyboard.type('Asking');
  await page.keyboard.press('Enter');
  await dialogGone();
  await page.keyboard.press('m');
  await page.getByRole('textbox', { name: 'Memo' }).fill('She laughs here, but not after.');
  await page.keyboard.press('Control+Enter');
  await dialogGone();
  // It stands in the side panel, and beside the passage where the window is narrow.
  await page
    .getByText('She laughs here, but not after.')
    .filter({ visible: true })
    .first()
    .waitFor();
  await go('Report');
  await page
    .getByText(/1 excerpt/u)
    .first()
    .waitFor();
});

it('undoes and does again', async () => {
  await button('Undo').click();
  await page.getByText(/Taken back:/u).waitFor();
  await button('Redo').click();
  await page.getByText(/Done again:/u).waitFor();
});

it('saves coded excerpts as a file', async () => {
  await go('Report');
  const [download] = await Promise.all([
    page.waitForEvent('download'),
    button('Save: Table of excerpts').click(),
  ]);
  const rows = parse(readFileSync(await download.path(), 'utf8'), { columns: true }) as Record<
    string,
    string
  >[];
  expect(rows.map(({ standing }) => standing).sort()).toEqual(['by hand', 'confirmed']);
  const confirmed = rows.find(({ standing }) => standing === 'confirmed');
  expect(confirmed?.['seen_suggestion']).toBe('yes');
  const byHand = rows.find(({ standing }) => standing === 'by hand');
  expect(byHand?.['theme']).toBe('Asking favours');
  expect(byHand?.['text'].split(/\s+/u).length).toBeLessThan(8);
});

it('keeps everything when the program is killed, and opens it again', async () => {
  await page.close();
  await app.kill();
  app = await startApp({ home });
  await openWindow();
  await button(/Island winter/u).click();
  await page.getByRole('heading', { name: 'Strata' }).waitFor();
  await page.locator('.list li button', { hasText: 'Getting there' }).waitFor();
  await page.locator('.list li button', { hasText: 'Asking favours' }).waitFor();
  await go('Report');
  await page
    .getByText(/1 excerpt/u)
    .first()
    .waitFor();
});

it('asks nothing of any machine but this one', () => {
  const elsewhere = requests.filter((url) => !/^(http|ws):\/\/127\.0\.0\.1:\d+\//u.test(url));
  expect(elsewhere.filter((url) => !url.startsWith('blob:') && !url.startsWith('data:'))).toEqual(
    [],
  );
  expect(faults).toEqual([]);
});
