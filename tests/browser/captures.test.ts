import { readFile } from 'node:fs/promises';
import type { Browser, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { CaptureSummary } from '../../shared/capture.ts';
import { page as pageOf } from '../../shared/problem.ts';
import { fixed } from '../../shared/quantities.ts';
import { Session } from '../../shared/session.ts';
import { DEMO_PASSWORD } from '../../server/services/seed-demo.ts';
import { launchBrowser, seriousFaults, signIn, visit, type Visit } from '../support/browser.ts';
import { dropFiles, unexpected } from './files.ts';

const PNG = Buffer.from('89504e470d0a1a0a0000000d4948445200000001000000010802000000907753de', 'hex');

/** The second lab: no other test puts captures there. */
const LAB = 'Tallow Reach Metrology';
const CAMPAIGN = 'Reference amplifiers';

let browser: Browser;
let window_: Visit;
let page: Page;

beforeAll(async () => {
  browser = await launchBrowser();
  window_ = await visit(browser);
  page = window_.page;
  await signIn(page, 'foreigner');
});
afterAll(() => browser.close());

const sample = (name: string) => readFile(new URL(`../../samples/${name}`, import.meta.url));
const row = (name: string) =>
  page.getByRole('row').filter({ has: page.getByRole('link', { name, exact: true }) });
const rowNames = () => page.locator('tbody a').allTextContents();
const query = () => new URL(page.url()).searchParams;

/** What the API says about a capture by its file's name. */
async function known(fileName: string): Promise<CaptureSummary | undefined> {
  const session = Session.parse(await (await page.request.get('/api/session')).json());
  const labId = session.labs.find(({ name }) => name === LAB)?.id;
  const answer = await page.request.get(`/api/labs/${labId}/captures`);
  return pageOf(CaptureSummary)
    .parse(await answer.json())
    .items.find((capture) => capture.fileName === fileName);
}

async function choose(listbox: string, option: string | RegExp): Promise<void> {
  await page.getByRole('combobox', { name: listbox, exact: true }).click();
  await page.getByRole('option', { name: option }).click();
}

describe('the captures screen', () => {
  it('says what to do where the lab has none', async () => {
    await page.getByText(`No captures in ${LAB} yet.`).waitFor();
    expect(await page.getByRole('button', { name: 'Choose files' }).count()).toBe(2);
  });

  it('reads dropped files into rows with the density that the API gives', async () => {
    await dropFiles(page, 'h1', {
      'strip14_out_log20.csv': await sample('strip14_out_log20.csv'),
      'strip12_out_pow50.csv': await sample('strip12_out_pow50.csv'),
    });
    for (const name of ['strip14_out_log20', 'strip12_out_pow50']) {
      await row(name).getByText('Working').waitFor();
      const density = (await known(`${name}.csv`))?.estimate?.dbmPerHz;
      expect(density).toBeTypeOf('number');
      expect(await row(name).textContent()).toContain(fixed(density ?? Number.NaN, 2));
    }
    await page.getByText('2 captures are ready').waitFor();
  });

  it('tells a duplicate and links to the capture that has the bytes', async () => {
    await page.locator('input[type=file]').setInputFiles({
      name: 'the same again.csv',
      mimeType: 'text/csv',
      buffer: await sample('strip14_out_log20.csv'),
    });
    const earlier = await known('strip14_out_log20.csv');
    await page.getByText(`Already here as ${earlier?.number}.`).waitFor();
    const link = page.getByRole('link', { name: `Open ${earlier?.number}` });
    expect(await link.getAttribute('href')).toBe(`/captures/${earlier?.id}`);
    expect(await page.locator('tbody a').count()).toBe(2);
  });

  it('says why a file that is no trace can’t be read', async () => {
    await page
      .locator('input[type=file]')
      .setInputFiles({ name: 'holiday.csv', mimeType: 'text/csv', buffer: PNG });
    await row('holiday').getByText('Unreadable').waitFor();
    const message = (await known('holiday.csv'))?.problem?.message ?? 'no sentence';
    expect(message).toMatch(/[a-z]{3}.*\.$/);
    expect(await row('holiday').textContent()).toContain(message);
  });

  it('keeps search and filters in the address, and Back undoes them', async () => {
    await page.goto('/captures');
    await row('holiday').waitFor();
    await page.keyboard.press('/');
    await page.keyboard.type('strip14');
    await expect.poll(rowNames, { timeout: 10_000 }).toEqual(['strip14_out_log20']);
    expect(query().get('search')).toBe('strip14');

    await page.goBack();
    await expect.poll(rowNames, { timeout: 10_000 }).toHaveLength(3);
    expect(await page.getByRole('searchbox').inputValue()).toBe('');

    await choose('State', 'unreadable');
    await expect.poll(rowNames, { timeout: 10_000 }).toEqual(['holiday']);
    expect(query().get('state')).toBe('unreadable');
    await page.reload();
    await row('holiday').waitFor();
    expect(await rowNames()).toEqual(['holiday']);
    await choose('Averaging', 'as declared');
    await page.getByText('No capture is like that.').waitFor();
    await page.getByRole('button', { name: 'Show all captures' }).click();
    await expect.poll(rowNames, { timeout: 10_000 }).toHaveLength(3);
  });

  it('moves, selects and opens by keys, unless they are turned off', async () => {
    await page.goto('/captures');
    await row('holiday').waitFor();
    const names = await rowNames();
    const focused = () => page.evaluate(() => document.activeElement?.textContent);
    await page.keyboard.press('j');
    await expect.poll(focused).toBe(names[0]);
    await page.keyboard.press('j');
    await expect.poll(focused).toBe(names[1]);
    await page.keyboard.press('k');
    await expect.poll(focused).toBe(names[0]);
    await page.keyboard.press('x');
    await page.getByText('1 capture selected').waitFor();
    await page.keyboard.press('Escape');
    await page.getByText('1 capture selected').waitFor({ state: 'detached' });

    await page.keyboard.press('?');
    await page.getByRole('dialog', { name: 'Keys' }).waitFor();
    await page.getByLabel('Single-letter keys act').uncheck();
    await page.keyboard.press('Escape');
    await page.getByRole('dialog').waitFor({ state: 'detached' });
    await page.keyboard.press('x');
    expect(await page.getByText('1 capture selected').count()).toBe(0);
    await page.getByRole('button', { name: 'Keys' }).click();
    await page.getByLabel('Single-letter keys act').check();
    await page.keyboard.press('Escape');
    await page.getByRole('dialog').waitFor({ state: 'detached' });

    await page.locator('tbody a').first().focus();
    await page.keyboard.press('Enter');
    await expect.poll(() => new URL(page.url()).pathname).toMatch(/^\/captures\/[0-9a-f-]{36}$/);
    await page.goBack();
    await row('holiday').waitFor();
  });

  it('moves selected captures to a campaign, and back', async () => {
    await page.getByLabel('Select strip14_out_log20').check({ force: true });
    await page.getByRole('button', { name: 'Move to a campaign' }).click();
    await page.getByRole('menuitem', { name: CAMPAIGN }).click();
    await page.getByText(`1 capture moved to “${CAMPAIGN}”.`).waitFor();
    await expect.poll(async () => (await known('strip14_out_log20.csv'))?.campaign?.name).toBe(CAMPAIGN);
    await page.getByText('1 capture; no limit set').waitFor();
    await page.getByRole('button', { name: 'Take it back' }).click();
    await expect.poll(async () => (await known('strip14_out_log20.csv'))?.campaign).toBe(null);
  });

  it('asks for the password in place when the session has run out, and goes on', async () => {
    await page.goto('/captures');
    await row('holiday').waitFor();
    await page.context().clearCookies();
    await choose('State', 'unreadable');
    const dialog = page.getByRole('dialog', { name: 'Your session has run out' });
    await dialog.waitFor();
    await dialog.getByLabel(/^Password/).fill(DEMO_PASSWORD);
    await page.keyboard.press('Enter');
    await dialog.waitFor({ state: 'detached' });
    await expect.poll(rowNames, { timeout: 10_000 }).toEqual(['holiday']);
    expect(query().get('state')).toBe('unreadable');
  });

  it('left the console without errors', () => {
    expect(unexpected(window_.complaints)).toEqual([]);
  });

  it.each([
    ['light', 1440],
    ['dark', 1440],
    ['light', 390],
    ['dark', 390],
  ] as const)(
    'has no serious fault of access and no sideways scroll in %s at %i px',
    async (colorScheme, width) => {
      await page.emulateMedia({ colorScheme });
      await page.setViewportSize({ width, height: 900 });
      await page.goto('/captures');
      await row('holiday').waitFor();
      expect(await seriousFaults(page)).toEqual([]);
      expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(width);
    },
  );
});
