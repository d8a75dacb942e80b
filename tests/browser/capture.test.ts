import { readFile } from 'node:fs/promises';
import type { Browser, Locator, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { Capture, CaptureSummary } from '../../shared/capture.ts';
import { page as pageOf } from '../../shared/problem.ts';
import { decimalsFor, fixed } from '../../src/lib/format.ts';
import { Session } from '../../shared/session.ts';
import { launchBrowser, seriousFaults, signIn, visit, type Visit } from '../support/browser.ts';
import { unexpected } from './files.ts';

const SAMPLE = 'strip14_out_pow20.csv';
const NEEDS_SETTING = 'messung_0412.csv';
const UNREADABLE = 'strip16_out.csv';

let browser: Browser;
let window_: Visit;
let page: Page;

beforeAll(async () => {
  browser = await launchBrowser();
  window_ = await visit(browser);
  page = window_.page;
  page.setDefaultTimeout(15_000);
  await signIn(page, 'engineer');
  for (const name of [SAMPLE, NEEDS_SETTING, UNREADABLE]) await upload(name);
});
afterAll(() => browser.close());

async function labId(): Promise<string> {
  return Session.parse(await (await page.request.get('/api/session')).json()).labs[0].id;
}

/** What the API says about a capture by its file's name. */
async function known(fileName: string): Promise<Capture> {
  const listed = await page.request.get(`/api/labs/${await labId()}/captures?limit=200`);
  const found = pageOf(CaptureSummary)
    .parse(await listed.json())
    .items.find((capture) => capture.fileName === fileName);
  if (found === undefined) throw new Error(`${fileName} isn’t among the captures.`);
  return Capture.parse(await (await page.request.get(`/api/captures/${found.id}`)).json());
}

/** Sends a sample and waits until it is read. */
async function upload(name: string): Promise<void> {
  const buffer = await readFile(new URL(`../../samples/${name}`, import.meta.url));
  const answer = await page.request.post(`/api/labs/${await labId()}/captures`, {
    multipart: { files: { name, mimeType: 'text/csv', buffer } },
  });
  expect(answer.ok()).toBe(true);
  await vi.waitFor(async () => expect((await known(name)).state).not.toMatch(/received|reading/), 30_000);
}

const section = (name: string) => page.getByRole('region', { name, exact: true });
const query = () => new URL(page.url()).searchParams;
const numberIn = (text: string) => Number(text.replaceAll('−', '-').replaceAll(',', ''));

async function open(fileName: string, search = ''): Promise<Capture> {
  const capture = await known(fileName);
  await page.goto(`/captures/${capture.id}${search}`);
  await page.getByRole('heading', { level: 1 }).filter({ hasText: capture.name }).waitFor();
  return capture;
}

/** Chooses a segment of a setting. */
const segment = (setting: string, option: string): Locator =>
  section('Settings').getByRole('radiogroup', { name: setting }).getByRole('radio', { name: option });

describe('a capture', () => {
  it('opens from the table and shows the density that the API gives', async () => {
    await page.goto('/captures');
    const capture = await known(SAMPLE);
    await page.getByRole('link', { name: capture.name, exact: true }).click();
    await expect.poll(() => new URL(page.url()).pathname).toBe(`/captures/${capture.id}`);
    const { estimate } = capture;
    if (estimate?.dbmPerHz == null) throw new Error('The sample has no density.');
    const shown = fixed(estimate.dbmPerHz, Math.max(2, decimalsFor(estimate.expandedUncertaintyDb)));
    await section('Ledger').getByText(shown, { exact: true }).first().waitFor();
    await page.getByText('Working, estimate 1', { exact: true }).waitFor();
  });

  it('shows ledger lines that add up to the total that is shown', async () => {
    const rows = section('Ledger').locator('[data-ledger] [data-value]');
    await rows.first().waitFor();
    const values = (await rows.allTextContents()).map(numberIn);
    const rounding = section('Ledger')
      .getByText('rounding of the lines above')
      .locator('xpath=following-sibling::*[1]');
    if ((await rounding.count()) > 0) values.push(numberIn((await rounding.textContent()) ?? ''));
    const total = numberIn((await section('Ledger').getByTestId('density').textContent()) ?? '');
    expect(values.length).toBeGreaterThan(2);
    expect(values.every(Number.isFinite)).toBe(true);
    expect(values.reduce((sum, value) => sum + value, 0)).toBeCloseTo(total, 6);
  });

  it('opens a ledger line by keyboard and shows its formula', async () => {
    const line = section('Ledger').locator('details').first();
    await line.locator('summary').focus();
    await page.keyboard.press('Enter');
    await expect.poll(() => line.getAttribute('open')).not.toBe(null);
    await line.getByText('from', { exact: true }).waitFor();
  });

  it('computes a changed setting at once, keeps it as the next estimate and lists it', async () => {
    const before = await known(SAMPLE);
    await segment('RBW kind', '−6 dB').click();
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    expect((await known(SAMPLE)).estimates).toHaveLength(1);
    await page.getByRole('button', { name: 'Keep estimate 2' }).first().click();
    await page.getByText('Estimate 2 kept.').waitFor();
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
    const after = await known(SAMPLE);
    expect(after.estimates.map(({ number }) => number)).toEqual([2, 1]);
    expect(after.settings.rbwKind?.value).toBe('6dB');
    expect(after.estimate?.dbmPerHz).not.toBe(before.estimate?.dbmPerHz);
    await section('Estimates').getByText(after.estimates[0].change).first().waitFor();
  });

  it('reads typed values with units, says what it can’t read, and undoes', async () => {
    const rbw = section('Settings').getByRole('textbox', { name: 'RBW', exact: true });
    await rbw.fill('3 furlongs');
    await page.keyboard.press('Tab');
    await section('Settings').getByRole('alert').getByText('isn’t a unit for this').waitFor();
    expect(await rbw.getAttribute('aria-invalid')).toBe('true');
    await rbw.fill('12,5k');
    await page.keyboard.press('Enter');
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    expect(await rbw.inputValue()).toBe('12.5');
    await rbw.blur();
    await page.keyboard.press('u');
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
    expect(await rbw.inputValue()).toBe('10');
    await page.keyboard.press('Shift+U');
    await expect.poll(() => rbw.inputValue()).toBe('12.5');
    await page.reload();
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    await page.getByRole('button', { name: 'Throw the change away' }).click();
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
  });

  it('shows an older estimate from its address and comes back by Esc', async () => {
    await open(SAMPLE, '?estimate=1');
    await page
      .getByText('Working, estimate 1 of 2', { exact: true })
      .or(page.getByText('estimate 1 of 2'))
      .waitFor();
    expect(await segment('RBW kind', '−3 dB').isDisabled()).toBe(true);
    await page.keyboard.press('Escape');
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
    expect(query().get('estimate')).toBe(null);
  });

  it('holds a left-out span in the address over a reload, until it is undone', async () => {
    const { traces } = await known(SAMPLE);
    const { firstHz, spacingHz } = traces[0];
    const span = `out ${firstHz + 10 * spacingHz}..${firstHz + 40 * spacingHz} seen on two boards`;
    await open(SAMPLE, `?span=${encodeURIComponent(span)}`);
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    const used = await section('Trace').textContent();
    await page.reload();
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    await expect.poll(() => section('Trace').textContent(), { timeout: 10_000 }).toBe(used);
    expect(query().getAll('span')).toEqual([span]);
    await page.getByRole('button', { name: 'Throw the change away' }).click();
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
    expect(query().has('span')).toBe(false);
  });

  it('leaves a marked span out by keyboard, saying first what that would change, and undoes it', async () => {
    await open(SAMPLE);
    const used = section('Trace').getByText(/points used$/);
    await section('Ledger').getByTestId('density').waitFor();
    await section('Trace').locator('canvas').waitFor();
    const before = await used.textContent();
    await page.keyboard.press('b');
    const marked = page.getByRole('group', { name: 'Marked span' });
    await marked.getByText(/^Without them/).waitFor();
    const lower = page.getByRole('slider', { name: 'Lower end of the marked span' });
    const start = Number(await lower.getAttribute('aria-valuenow'));
    await lower.press('Shift+ArrowLeft');
    expect(Number(await lower.getAttribute('aria-valuenow'))).toBeLessThan(start);
    await page.keyboard.press('e');
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    await marked.waitFor({ state: 'detached' });
    expect(query().getAll('span').at(-1)).toMatch(/^out /);
    await expect.poll(() => used.textContent(), { timeout: 10_000 }).not.toBe(before);
    await page.keyboard.press('u');
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
    expect(query().has('span')).toBe(false);
    await expect.poll(() => used.textContent()).toBe(before);
  });

  it('leaves a span out by dragging over the trace', async () => {
    const box = await section('Trace').locator('.u-over').boundingBox();
    if (box === null) throw new Error('The plot isn’t on the page.');
    const y = box.y + box.height / 2;
    await page.mouse.move(box.x + box.width * 0.08, y);
    await page.mouse.down();
    await page.mouse.move(box.x + box.width * 0.12, y, { steps: 4 });
    await page.mouse.up();
    await page.getByRole('group', { name: 'Marked span' }).getByRole('button', { name: 'Exclude' }).click();
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    expect(query().getAll('span')).toHaveLength(1);
    await page.keyboard.press('u');
    await page.getByText('Working, estimate 2', { exact: true }).waitFor();
  });

  it('keeps the zoom in the address over a reload', async () => {
    await page.keyboard.press('+');
    await expect.poll(() => query().has('from')).toBe(true);
    const address = page.url();
    await page.reload();
    await section('Trace').getByRole('button', { name: 'Whole span' }).waitFor();
    expect(page.url()).toBe(address);
    await page.keyboard.press('0');
    await expect.poll(() => query().has('from')).toBe(false);
  });

  it('renames in place', async () => {
    await page.getByRole('button', { name: /^Rename/ }).click();
    await page.getByRole('textbox', { name: 'Name of the capture' }).fill('Strip 14 on the bench');
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { level: 1, name: /Strip 14 on the bench/ }).waitFor();
    expect((await known(SAMPLE)).name).toBe('Strip 14 on the bench');
  });

  it('jumps to sections by number and from a finding to its setting', async () => {
    await open(NEEDS_SETTING);
    await section('Findings').waitFor();
    await page.keyboard.press('6');
    await expect.poll(() => page.evaluate(() => document.activeElement?.textContent)).toBe('Findings');
    await section('Findings').getByRole('button', { name: 'State the shape in §5' }).click();
    const focused = () => page.evaluate(() => document.activeElement?.getAttribute('aria-label'));
    await expect.poll(focused).toBe('Filter shape');
  });

  it('asks for the setting that a file doesn’t state and takes the answer by one click', async () => {
    const capture = await open(NEEDS_SETTING);
    expect(capture.state).toBe('needsSettings');
    const question = page.getByRole('region', { name: 'Waiting for you' });
    await question.getByText('On which scale were the sweeps averaged?').waitFor();
    await question.getByRole('button', { name: /^Log/ }).click();
    await page.getByText('Unsaved change', { exact: true }).waitFor();
    await question.waitFor({ state: 'detached' });
    await page
      .getByRole('button', { name: /^Keep estimate/ })
      .first()
      .click();
    await page.getByText(/^Estimate \d+ kept\.$/).waitFor();
    const after = await known(NEEDS_SETTING);
    expect(after.state).toBe('ready');
    expect(after.estimate?.dbmPerHz).toBeTypeOf('number');
  });

  it('says why a file can’t be read and hands the very bytes back', async () => {
    const capture = await open(UNREADABLE);
    expect(capture.state).toBe('unreadable');
    await page.getByText(capture.problem?.message ?? 'no sentence').waitFor();
    await page.getByText(capture.problem?.advice ?? 'no advice').waitFor();
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: /^Download the file/ }).click(),
    ]);
    const bytes = await readFile(await download.path());
    const sample = await readFile(new URL(`../../samples/${UNREADABLE}`, import.meta.url));
    expect(bytes.equals(sample)).toBe(true);
  });

  it('left the console without errors', () => {
    expect(unexpected(window_.complaints)).toEqual([]);
  });

  it('says so where there is no such capture', async () => {
    await page.goto('/captures/00000000-0000-4000-8000-000000000000');
    await page.getByRole('heading', { name: 'No such capture' }).waitFor();
  });

  it.each([
    ['light', 1440],
    ['dark', 1440],
    ['light', 390],
    ['dark', 390],
  ] as const)('has no serious fault of access in %s at %i px', async (colorScheme, width) => {
    await page.emulateMedia({ colorScheme });
    await page.setViewportSize({ width, height: 900 });
    await open(SAMPLE);
    await section('Ledger').waitFor();
    expect(await seriousFaults(page)).toEqual([]);
    expect(await page.evaluate(() => document.documentElement.scrollWidth)).toBe(width);
  });
});
