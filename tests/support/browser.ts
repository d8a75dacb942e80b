import { existsSync, readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { inject } from 'vitest';
import { DEMO_PASSWORD } from '../../server/services/seed-demo.ts';
import { EMAILS, type Who } from './api.ts';

const FLAGS = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

/** Debian's Chromium, headless. */
export function launchBrowser(): Promise<Browser> {
  const executablePath = process.env.PERHERTZ_CHROMIUM ?? '/usr/bin/chromium';
  if (!existsSync(executablePath))
    throw new Error(`There is no Chromium at ${executablePath}; npm test installs it.`);
  return chromium.launch({ executablePath, headless: true, args: FLAGS });
}

export interface Visit {
  context: BrowserContext;
  page: Page;
  /** Errors and warnings that the console has shown since. */
  complaints: string[];
  close(): Promise<void>;
}

export interface VisitOptions {
  width?: number;
  height?: number;
  colorScheme?: 'light' | 'dark';
}

/** A new private window on the running application, nobody signed in. */
export async function visit(browser: Browser, options: VisitOptions = {}): Promise<Visit> {
  const { width = 1440, height = 1000, colorScheme = 'light' } = options;
  const context = await browser.newContext({
    baseURL: inject('baseUrl'),
    viewport: { width, height },
    colorScheme,
    reducedMotion: 'reduce',
    hasTouch: width < 600,
    acceptDownloads: true,
  });
  const page = await context.newPage();
  const complaints: string[] = [];
  page.on('console', (message) => {
    if (['error', 'warning'].includes(message.type())) complaints.push(message.text());
  });
  page.on('pageerror', (error) => complaints.push(String(error)));
  return { context, page, complaints, close: () => context.close() };
}

/** Signs in on the sign-in page as one of the demo's people and waits for the captures. */
export async function signIn(page: Page, who: Who, path = '/captures'): Promise<void> {
  await page.goto(path);
  await page.getByLabel('Email').fill(EMAILS[who]);
  await page.getByLabel('Password').fill(DEMO_PASSWORD);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { level: 1 }).filter({ hasNotText: 'Sign in' }).waitFor();
}

const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');

/** Serious and critical faults that axe-core finds on a page, as `rule: element`. */
export async function seriousFaults(page: Page): Promise<string[]> {
  await page.evaluate(axeSource);
  return page.evaluate(async () => {
    const axe: {
      run: (
        options: object,
      ) => Promise<{ violations: { id: string; impact: string; nodes: { html: string }[] }[] }>;
    } = Reflect.get(window, 'axe');
    const { violations } = await axe.run({ resultTypes: ['violations'] });
    return violations
      .filter(({ impact }) => impact === 'serious' || impact === 'critical')
      .flatMap(({ id, nodes }) => nodes.map(({ html }) => `${id}: ${html.slice(0, 160)}`));
  });
}
