/** Debian's Chromium, people who sign in, and pages that must not complain. */
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { expect } from 'vitest';
import { demoPeople, type DemoPerson } from '../../server/demo/people.ts';
import type { RunningApplication } from '../setup/application.ts';

export function openChromium(): Promise<Browser> {
  return chromium.launch({ executablePath: '/usr/bin/chromium', args: ['--no-sandbox', '--disable-gpu', '--disable-quic', '--no-first-run', '--disable-background-networking', '--disable-component-update', '--disable-sync'] });
}

export function demoPassword(application: RunningApplication): string {
  return readFileSync(join(application.storage, 'demo-accounts.txt'), 'utf8').split('\n')[0].trim().split(/\s+/).pop()!;
}

/** What the pages wrote to the console as errors; a 401 before sign-in is not one. */
export function complaintsOf(page: Page): string[] {
  const complaints: string[] = [];
  page.on('pageerror', (error) => complaints.push(String(error)));
  page.on('console', (message) => {
    if (message.type() === 'error' && !/status of 401/.test(message.text())) complaints.push(`${page.url()}: ${message.text()}`);
  });
  return complaints;
}

export async function signIn(application: RunningApplication, context: BrowserContext, key: DemoPerson['key']): Promise<Page> {
  const page = await context.newPage();
  page.setDefaultTimeout(30_000);
  await page.goto(`${application.url}/sign-in`);
  await page.getByLabel('E-mail address').fill(demoPeople.find((person) => person.key === key)!.email);
  await page.getByLabel('Password').fill(demoPassword(application));
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.getByRole('heading', { name: /^Desk of/ }).waitFor();
  return page;
}

/** Waits for a text in the page, and says what the page showed when it does not come. */
export async function shows(page: Page, text: string | RegExp, timeout = 60_000): Promise<void> {
  const found = await page.getByText(text).first().waitFor({ timeout }).then(() => true, () => false);
  if (!found) expect.fail(`The page ${page.url()} does not show ${String(text)}. It shows: ${(await page.locator('body').innerText()).slice(-2500)}`);
}
