import type { Browser } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { DEMO_PASSWORD } from '../../server/services/seed-demo.ts';
import { EMAILS } from '../support/api.ts';
import { launchBrowser, seriousFaults, signIn, visit } from '../support/browser.ts';
import { unexpected } from './files.ts';

let browser: Browser;
beforeAll(async () => {
  browser = await launchBrowser();
});
afterAll(() => browser.close());

describe('signing in', () => {
  it('refuses a wrong password in a sentence, keeps the address, then lets in to the page that was asked for', async () => {
    const { page, complaints, close } = await visit(browser);
    await page.goto('/method#spurs');
    await page.getByLabel('Email').fill(EMAILS.engineer);
    await page.getByLabel('Password').fill('not this one');
    await page.getByRole('button', { name: 'Sign in' }).click();

    const refusal = page.getByRole('alert');
    await refusal.waitFor();
    expect(await refusal.textContent()).toMatch(/\d+ tries are left/);
    expect(await page.getByLabel('Email').inputValue()).toBe(EMAILS.engineer);
    expect(await page.getByLabel('Password').getAttribute('aria-invalid')).toBe('true');

    await page.getByLabel('Password').fill(DEMO_PASSWORD);
    await page.keyboard.press('Enter');
    await page.getByRole('heading', { level: 1, name: 'Method' }).waitFor();
    expect(new URL(page.url()).pathname + new URL(page.url()).hash).toBe('/method#spurs');
    expect(unexpected(complaints)).toEqual([]);
    await close();
  });

  it('asks for a whole address before it asks the server', async () => {
    const { page, close } = await visit(browser);
    await page.goto('/sign-in');
    await page.getByLabel('Email').fill('engineer');
    await page.getByLabel('Password').fill('x');
    await page.getByRole('button', { name: 'Sign in' }).click();
    expect(await page.getByRole('alert').textContent()).toContain('whole address');
    await close();
  });

  it('never leaves the site for the page asked for', async () => {
    const { page, close } = await visit(browser);
    await signIn(page, 'engineer', '/sign-in?to=//elsewhere.example/');
    expect(page.url()).toBe(`${inject('baseUrl')}/captures`);
    await close();
  });

  it('signs out', async () => {
    const { page, close } = await visit(browser);
    await signIn(page, 'technician');
    await page.getByRole('button', { name: 'Sign out' }).click();
    await page.getByRole('heading', { level: 1, name: 'Sign in' }).waitFor();
    await page.goto('/captures');
    await page.getByRole('heading', { level: 1, name: 'Sign in' }).waitFor();
    await close();
  });

  it.each(['light', 'dark'] as const)('has no serious fault of access in %s', async (colorScheme) => {
    const { page, close } = await visit(browser, { colorScheme });
    await page.goto('/sign-in');
    await page.getByText(/^Engine/).waitFor();
    expect(await seriousFaults(page)).toEqual([]);
    await close();
  });

  it('remembers the chosen theme against the system’s', async () => {
    const { page, close } = await visit(browser, { colorScheme: 'dark' });
    await signIn(page, 'engineer');
    const paper = () => page.evaluate(() => getComputedStyle(document.documentElement).backgroundColor);
    expect(await paper()).toBe('rgb(20, 25, 31)');
    await page.getByRole('combobox', { name: 'Theme' }).click();
    await page.getByRole('option', { name: 'light' }).click();
    expect(await paper()).toBe('rgb(250, 248, 243)');
    await page.reload();
    await page.getByRole('navigation', { name: 'Screens' }).waitFor();
    expect(await paper()).toBe('rgb(250, 248, 243)');
    await close();
  });
});
