import { closeSync, openSync, readFileSync, rmSync, writeFileSync, writeSync } from 'node:fs';
import { join } from 'node:path';
import type { Page } from 'playwright-core';
import { nameBeside } from '../../main/project/name-beside.ts';

/** A view worth looking at: reached from the one before in the same window. */
export interface Scene {
  readonly name: string;
  /** `home` is the person's home folder, for what lies beside a study. */
  readonly reach: (page: Page, home: string) => Promise<unknown>;
}

const button = (page: Page, name: string | RegExp) => page.getByRole('button', { name });
const place = (page: Page, name: string) =>
  page.getByRole('navigation', { name: 'Places' }).getByRole('button', { name }).click();
const closeDialog = async (page: Page): Promise<void> => {
  await page.keyboard.press('Escape');
  await page.getByRole('dialog').waitFor({ state: 'detached' });
};
const fromStudy = async (page: Page, item: string): Promise<void> => {
  await button(page, /^Study/u).click();
  await page.getByRole('menuitem', { name: item }).click();
};
const emptyStudy = (home: string): string =>
  join(home, 'Documents', 'Understory', 'An empty study.understory');
const fromMore = async (page: Page, item: string): Promise<void> => {
  await button(page, /^More/u).click();
  await page.getByRole('menuitem', { name: item }).click();
};
/** Hands a file to the file field of this name, as the person's own chooser would. */
const chooseFile = (page: Page, field: string, name: string, text: string): Promise<void> =>
  page
    .getByLabel(field, { exact: true })
    .and(page.locator('input[type=file]'))
    .setInputFiles({ name, mimeType: 'text/plain', buffer: Buffer.from(text) });

/** Every place, dialog and empty state, in an order that a person could follow. */
export const scenes: readonly Scene[] = [
  {
    name: 'first-run',
    reach: (page) => page.getByRole('heading', { name: 'Understory' }).waitFor(),
  },
  {
    name: 'first-run-start',
    reach: async (page) => {
      await button(page, 'Start a study').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'first-run-start-locked',
    reach: async (page) => {
      await page.getByLabel('Name of the study').fill('An empty study');
      await page.getByLabel('Lock it with a password').check();
      await page.getByLabel('New password').fill('moss after four rains');
      await page.getByLabel('Once more').fill('bark');
    },
  },
  {
    name: 'gather-empty',
    reach: async (page) => {
      await page.getByLabel('Lock it with a password').uncheck();
      await page.getByLabel('Name of the study').fill('An empty study');
      await button(page, 'Start the study').click();
      await page.getByText('Bring in your transcripts').waitFor();
    },
  },
  { name: 'read-empty', reach: (page) => place(page, 'Read') },
  { name: 'shape-empty', reach: (page) => place(page, 'Shape') },
  { name: 'report-empty', reach: (page) => place(page, 'Report') },
  {
    name: 'study-names',
    reach: async (page) => {
      await button(page, /^Study/u).click();
      await page.getByRole('menuitem', { name: 'Study and reader names' }).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'study-trail',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Trail …');
      await page.getByText('The chain ends in').waitFor();
    },
  },
  {
    name: 'study-check',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Check the study …');
      await page.getByRole('dialog').getByRole('button', { name: 'Check the study' }).click();
      await page.getByText('The chain ends in').waitFor();
    },
  },
  {
    name: 'study-save-as',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Save as …');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'study-backups',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Backups …');
      await button(page, /^Open a copy of backup/u)
        .first()
        .waitFor();
    },
  },
  {
    name: 'study-backups-remove',
    reach: (page) =>
      button(page, /^Remove backup/u)
        .first()
        .click(),
  },
  {
    name: 'study-compact',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Compact the file …');
      await page.getByText('Nothing can go').waitFor();
    },
  },
  {
    name: 'study-password',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Set a password');
      await page.getByLabel('New password').waitFor();
    },
  },
  {
    name: 'study-password-set',
    reach: async (page) => {
      await page.getByLabel('New password').fill('moss after four rains');
      await page.getByLabel('Once more').fill('moss after four rains');
      await page.getByLabel('The password is kept in a safe place').check();
      await button(page, 'Set the password').click();
      await page.getByText('The password is set.').waitFor();
    },
  },
  {
    name: 'study-password-change',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Password and locking');
      await page.getByLabel('Present password').waitFor();
    },
  },
  {
    name: 'study-password-remove',
    reach: async (page) => {
      await page.getByLabel('Remove it').check();
      await page.getByLabel('Present password').fill('a guess');
      await button(page, 'Remove the password').click();
      await page.getByRole('dialog').getByRole('alert').waitFor();
    },
  },
  {
    name: 'locked',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Lock now');
      await page.getByRole('heading', { name: 'Locked' }).waitFor();
    },
  },
  {
    name: 'locked-wrong',
    reach: async (page) => {
      await page.getByLabel('Password', { exact: true }).fill('a guess');
      await button(page, 'Open the study').click();
      await page.getByText('That is not the password').waitFor();
    },
  },
  {
    name: 'locked-opening',
    reach: async (page) => {
      await button(page, 'Leave it locked').click();
      await button(page, /An empty study/u).click();
      await page.getByText('This study has a password.').waitFor();
    },
  },
  {
    name: 'first-run-open',
    reach: async (page) => {
      await page.getByLabel('Password', { exact: true }).fill('moss after four rains');
      await page.keyboard.press('Enter');
      await page.getByRole('navigation', { name: 'Places' }).waitFor();
      await button(page, /^Study/u).click();
      await page.getByRole('menuitem', { name: 'Close the study' }).click();
      await button(page, 'Open a study').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'open-noted',
    reach: async (page, home) => {
      const owner = { host: 'north-office', name: 'ruth', since: '2026-02-01T09:00:00.000Z' };
      writeFileSync(nameBeside(emptyStudy(home), 'open'), JSON.stringify(owner));
      await button(page, 'Open').last().click();
      await button(page, 'Open for writing all the same').waitFor();
    },
  },
  {
    name: 'open-damaged',
    reach: async (page, home) => {
      await closeDialog(page);
      const file = emptyStudy(home);
      rmSync(nameBeside(file, 'open'));
      const handle = openSync(file, 'r+');
      writeSync(handle, 'damage!', readFileSync(file).length - 20);
      closeSync(handle);
      await page.getByRole('button', { name: /^An empty study/u }).click();
      await page.getByLabel('Password', { exact: true }).fill('moss after four rains');
      await page.keyboard.press('Enter');
      await button(page, 'Recover into a new file').waitFor();
    },
  },
  {
    name: 'recovered',
    reach: async (page) => {
      await button(page, 'Recover into a new file').click();
      const password = page.getByRole('dialog').getByLabel('Password of the study');
      await password.fill('moss after four rains');
      await button(page, 'Recover into a new file').click();
      await button(page, 'Go on in the new file').waitFor();
    },
  },
  {
    name: 'shape',
    reach: async (page) => {
      await button(page, 'Go on in the new file').click();
      await fromStudy(page, 'Close the study');
      await button(page, 'Open the demo study').click();
      await page.getByRole('heading', { name: 'Strata' }).waitFor({ timeout: 120_000 });
      await page.getByLabel('Which passages').waitFor();
    },
  },
  {
    name: 'shape-name',
    reach: async (page) => {
      await button(page, 'Name it').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-named',
    reach: async (page) => {
      await page
        .getByLabel('Name', { exact: true })
        .fill('Getting to appointments on the mainland and back again within the same week');
      await button(page, 'Save name').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await button(page, 'Pin').click();
      await button(page, 'Unpin').waitFor();
    },
  },
  {
    name: 'shape-define',
    reach: async (page) => {
      await button(page, 'Define').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-defined',
    reach: async (page) => {
      await page
        .getByLabel('Brief definition')
        .fill(
          'Reaching medical and official appointments on the mainland; nights away, rebooking.',
        );
      await page.getByLabel('When not to use').fill('Visits for pleasure.');
      await button(page, 'Save entry').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
    },
  },
  {
    name: 'shape-word-menu',
    reach: async (page) => {
      await page.locator('.word').nth(3).click();
      await page.getByRole('menuitem', { name: 'Where it is said' }).waitFor();
    },
  },
  {
    name: 'shape-word',
    reach: async (page) => {
      await page.getByRole('menuitem', { name: 'Where it is said' }).click();
      await page.getByRole('dialog').getByRole('listitem').first().waitFor();
    },
  },
  {
    name: 'shape-merge',
    reach: async (page) => {
      await closeDialog(page);
      await fromMore(page, 'Merge with another …');
      await page.getByRole('radio').first().check();
    },
  },
  {
    name: 'shape-heading',
    reach: async (page) => {
      await closeDialog(page);
      await fromMore(page, 'Put under a new heading …');
      await page.getByLabel('Name', { exact: true }).fill('Getting about');
    },
  },
  {
    name: 'shape-headed',
    reach: async (page) => {
      await button(page, 'Add the heading').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await page.getByRole('heading', { name: 'Under no heading' }).waitFor();
    },
  },
  {
    name: 'shape-wordings',
    reach: async (page) => {
      await button(page, 'See the earlier ones').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-for-whom',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByText('For whom, and after which question').click();
      await page.getByText('After which question', { exact: true }).waitFor();
    },
  },
  {
    name: 'shape-table',
    reach: async (page) => {
      await page.getByText('For whom, and after which question').click();
      await button(page, /^Picture/u).click();
      await page.getByRole('menuitem', { name: 'Show a table of the same' }).click();
      await page.getByRole('columnheader', { name: 'Strongest in' }).waitFor();
    },
  },
  {
    name: 'shape-split',
    reach: async (page) => {
      await button(page, /^Table/u).click();
      await page.getByRole('menuitem', { name: 'Show the picture' }).click();
      // Words that are pinned are not divided.
      await button(page, 'Unpin').click();
      await page.getByRole('button', { name: 'Pin', exact: true }).waitFor();
      await fromMore(page, 'Split in two …');
      await page.getByRole('heading', { name: 'A new candidate' }).waitFor({ timeout: 60_000 });
    },
  },
  {
    name: 'shape-steady',
    reach: async (page) => {
      await closeDialog(page);
      await button(page, 'Measure it').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-how-many',
    reach: async (page) => {
      await closeDialog(page);
      await button(page, 'How many themes?').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-memo',
    reach: async (page) => {
      await closeDialog(page);
      await fromMore(page, 'Write a memo');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-add',
    reach: async (page) => {
      await closeDialog(page);
      await button(page, 'Add a theme').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'shape-waiting',
    reach: async (page) => {
      await page.getByLabel('Name', { exact: true }).fill('Not being asked');
      await page.getByRole('textbox', { name: 'Seed words' }).fill('survey meeting council');
      await button(page, 'Add the theme').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await page.getByText(/Waiting:/u).waitFor();
    },
  },
  {
    name: 'shape-moved',
    reach: async (page) => {
      await button(page, 'Re-fit').click();
      await page.getByRole('heading', { name: 'What moved' }).waitFor({ timeout: 120_000 });
    },
  },
  {
    name: 'shape-fits',
    reach: async (page) => {
      await button(page, 'Keep this fit').click();
      await page.getByRole('button', { name: 'Fits', exact: true }).click();
      await page.getByText(/^Leading themes agree/u).waitFor();
    },
  },
  {
    name: 'shape-scratch',
    reach: async (page) => {
      await closeDialog(page);
      await button(page, /From scratch/u).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'study-take-in',
    reach: async (page) => {
      await closeDialog(page);
      await fromStudy(page, 'Take in another copy …');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'find',
    reach: async (page) => {
      await closeDialog(page);
      await page.keyboard.press('Control+k');
      await page.getByPlaceholder('Passages, words, themes, transcripts').fill('diesel');
      await page.getByRole('dialog').getByRole('listitem').first().waitFor();
    },
  },
  {
    name: 'gather',
    reach: async (page) => {
      await closeDialog(page);
      await place(page, 'Gather');
      await page.getByRole('tab', { name: 'Transcripts' }).waitFor();
    },
  },
  {
    name: 'gather-rename',
    reach: async (page) => {
      await page.getByRole('button', { name: 'Rename', exact: true }).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'gather-remove',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('button', { name: 'Remove', exact: true }).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'gather-seal',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('button', { name: 'Seal originals …' }).click();
      await page.getByText('There are no originals to seal').waitFor();
    },
  },
  {
    name: 'gather-names',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('tab', { name: /Names and numbers/u }).click();
      await page.getByRole('heading', { name: /Names of persons/u }).waitFor();
      await page.getByRole('button', { name: 'Read it' }).first().waitFor();
    },
  },
  {
    name: 'gather-names-all',
    reach: async (page) => {
      await button(page, 'Put stand-ins in …').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'gather-names-key',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('button', { name: 'More' }).click();
      await page.getByRole('menuitem', { name: /Take a key in/u }).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'gather-participants',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('tab', { name: /Participants/u }).click();
    },
  },
  {
    name: 'gather-withdraw',
    reach: async (page) => {
      await page
        .getByRole('button', { name: /^Withdraw /u })
        .first()
        .click();
      await page.getByText('Transcripts that go').waitFor();
    },
  },
  {
    name: 'gather-attribute',
    reach: async (page) => {
      await closeDialog(page);
      await button(page, 'Add an attribute').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'gather-words',
    reach: async (page) => {
      await closeDialog(page);
      await page.getByRole('tab', { name: 'What is counted' }).click();
    },
  },
  {
    name: 'gather-notes-empty',
    reach: (page) => page.getByRole('tab', { name: 'Field notes' }).click(),
  },
  {
    name: 'gather-notes',
    reach: async (page) => {
      await chooseFile(
        page,
        'Field notes',
        'On the pier after the third interview.txt',
        'Wind from the north, the shop shut early.\nShe kept coming back to the boat, and went quiet about the school.\n',
      );
      await page.getByRole('article', { name: /On the pier/u }).waitFor();
    },
  },
  {
    name: 'gather-table',
    reach: async (page) => {
      await chooseFile(
        page,
        'Transcript files',
        'Open answers of the island survey.csv',
        [
          'Person,Age group,Email,What would make you stay on the island for another ten years?,What else?',
          'P01,60 and over,,"A boat that goes when it says it goes, and a nurse.",Thank you for asking.',
          'P02,30 to 44,,"Somewhere to rent that is not let by the week in summer.",',
          'P03,18 to 29,,"Work that lasts through the winter; the rest I can do without.",The school.',
          '',
        ].join('\n'),
      );
      await page.getByRole('dialog', { name: 'A table of answers' }).waitFor();
    },
  },
  {
    name: 'gather-codebook',
    reach: async (page) => {
      await button(page, 'Leave it out').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await chooseFile(
        page,
        'Codebook file',
        'Codes from the pilot.csv',
        [
          'Code,Heading,Definition,Seed words',
          'Waiting for the boat,Getting about,"Hours and nights lost when the ferry does not go.",ferry boat cancelled',
          'Being the last ones,Staying,"A family or a trade of which nobody comes after.",last nobody',
          'Silence,,"Where an answer stops short.",',
          '',
        ].join('\n'),
      );
      await page.getByRole('dialog', { name: 'A codebook' }).waitFor();
      await page.getByLabel('From seed words').check();
    },
  },
  {
    name: 'gather-doubles',
    reach: async (page) => {
      await closeDialog(page);
      await chooseFile(
        page,
        'Transcript files',
        'P02 crofter.txt',
        'Interviewer: How long have you been here?\n\nP02: All my days, and my father before me.\n',
      );
      await page.getByRole('dialog', { name: /of a name that is here already/u }).waitFor();
    },
  },
  {
    name: 'read',
    reach: async (page) => {
      await closeDialog(page);
      await place(page, 'Read');
      await page.locator('[role=article][aria-current=true]').waitFor();
    },
  },
  {
    name: 'read-list',
    reach: async (page) => {
      await button(page, /Reading list/u).click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'read-one-at-a-time',
    reach: async (page) => {
      await page.getByRole('radio', { name: /Strongest first/iu }).check();
      await button(page, 'Read this list').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await page.locator('[role=article][aria-current=true]').waitFor();
    },
  },
  {
    name: 'read-theme',
    reach: async (page) => {
      await page.keyboard.press('t');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'read-memo',
    reach: async (page) => {
      await closeDialog(page);
      await page.keyboard.press('m');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'read-keys',
    reach: async (page) => {
      await closeDialog(page);
      await page.keyboard.press('?');
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'read-keys-changing',
    reach: async (page) => {
      await button(page, 'Change keys').click();
      await page.getByLabel('Key for: next passage').fill('k');
      await page.keyboard.press('Tab');
      await page.getByRole('alert').waitFor();
    },
  },
  {
    name: 'read-search',
    reach: async (page) => {
      await closeDialog(page);
      await page.keyboard.press('s');
      await page.getByLabel('Words').fill('boat');
      await page.getByText(/places? in/u).waitFor();
    },
  },
  {
    name: 'read-keyword-list',
    reach: async (page) => {
      await button(page, 'Read these passages').click();
      await page.getByRole('dialog').waitFor({ state: 'detached' });
      await button(page, 'Code the 1 opened').waitFor();
    },
  },
  {
    name: 'read-code-opened',
    reach: async (page) => {
      await button(page, 'Code the 1 opened').click();
      await page.getByRole('dialog').waitFor();
    },
  },
  {
    name: 'read-decisions-say',
    reach: async (page) => {
      await closeDialog(page);
      await page
        .getByRole('complementary')
        .getByRole('button', { name: 'More', exact: true })
        .click();
      await page.getByRole('dialog', { name: 'What decisions say' }).waitFor();
    },
  },
  {
    name: 'report',
    reach: async (page) => {
      await closeDialog(page);
      await place(page, 'Report');
      await page.getByText('Nothing was confirmed yet').waitFor();
    },
  },
  {
    name: 'report-suggested',
    reach: async (page) => {
      await button(page, 'Take suggestions in').click();
      await page.getByText('Nothing was confirmed yet').waitFor({ state: 'detached' });
    },
  },
];

/** The window sizes that every screen must hold at. */
export const sizes = [
  { width: 1280, height: 800 },
  { width: 1600, height: 1000 },
] as const;
