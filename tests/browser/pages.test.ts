/** Every page, light and dark, wide and narrow: no accessibility violation, no scrolling sideways, nothing in the console. */
import { AxeBuilder } from '@axe-core/playwright';
import type { Browser, BrowserContext, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startApplication, type RunningApplication } from '../setup/application.ts';
import { complaintsOf, openChromium, signIn } from './chromium.ts';

let application: RunningApplication;
let browser: Browser;
let steward: BrowserContext;
let administrator: BrowserContext;
const ids: Record<string, string> = {};

beforeAll(async () => {
  application = await startApplication({ demo: true });
  browser = await openChromium();
  steward = await browser.newContext();
  const page = await signIn(application, steward, 'steward');
  const read = async (path: string) => (await page.request.get(application.url + path)).json();
  const { archives } = await read('/api/campaigns/saltmere-basin/archives');
  ids.archive = archives.find((archive: { run: string }) => archive.run === 'neap').id;
  ids.draft = (await read('/api/campaigns/saltmere-basin/datasets/plume-temperature')).drafts[0].id;
  await page.close();
  administrator = await browser.newContext();
  await (await signIn(application, administrator, 'administrator')).close();
});

afterAll(async () => {
  await browser?.close();
  await application?.stop();
});

const campaign = '/campaigns/saltmere-basin';
const pages: [string, () => string, (() => BrowserContext)?][] = [
  ['desk', () => '/'], ['campaigns', () => '/campaigns'], ['campaign', () => campaign], ['datasets of a campaign', () => `${campaign}/datasets`], ['members', () => `${campaign}/members`, () => administrator],
  ['settings', () => `${campaign}/settings`, () => administrator], ['open a campaign', () => '/campaigns/new', () => administrator], ['hand in', () => `${campaign}/hand-in`],
  ['archive', () => `/archives/${ids.archive}`], ['record', () => `/archives/${ids.archive}/record`], ['snapshots', () => `/archives/${ids.archive}/snapshots`], ['reading', () => `/archives/${ids.archive}/reading`], ['files and run', () => `/archives/${ids.archive}/about`],
  ['datasets', () => '/datasets'], ['dataset', () => `${campaign}/datasets/plume-temperature`], ['recipe', () => `/drafts/${ids.draft}`], ['findings of a draft', () => `/drafts/${ids.draft}/findings`], ['matrix', () => `/drafts/${ids.draft}/matrix`], ['sources', () => `/drafts/${ids.draft}/sources`],
  ['release', () => `${campaign}/datasets/plume-temperature/releases/1`], ['review', () => '/review'], ['audit log', () => '/audit', () => administrator], ['tokens', () => '/tokens'], ['administration', () => '/admin', () => administrator], ['demo inbox', () => '/demo-inbox'],
  ['nothing', () => '/no/such/page'],
];

async function look(page: Page, path: string): Promise<string[]> {
  const troubles: string[] = [];
  await page.goto(application.url + path);
  await page.getByRole('heading', { level: 1 }).waitFor();
  await page.waitForLoadState('networkidle');
  const sideways = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
  if (sideways > 0) troubles.push(`scrolls ${sideways} px sideways`);
  const { violations } = await new AxeBuilder({ page }).withTags(['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa']).analyze();
  for (const violation of violations) troubles.push(`${violation.id}: ${violation.nodes[0]?.html.slice(0, 200)} ${violation.nodes[0]?.failureSummary ?? ''}`);
  return troubles;
}

describe.each(['light', 'dark'] as const)('%s', (theme) => {
  describe.each([1440, 390])('%i px', (width) => {
    it.each(pages)('%s', async (_name, path, who = () => steward) => {
      const page = await who().newPage();
      const complaints = complaintsOf(page);
      try {
        await page.setViewportSize({ width, height: 900 });
        await page.emulateMedia({ colorScheme: theme, reducedMotion: 'reduce' });
        expect(await look(page, path())).toEqual([]);
        expect(complaints).toEqual([]);
      } finally {
        await page.close();
      }
    });
    it.each(['/sign-in', '/forgot', '/reset?token=x'])('%s, signed out', async (path) => {
      const context = await browser.newContext({ viewport: { width, height: 900 }, colorScheme: theme });
      try {
        expect(await look(await context.newPage(), path)).toEqual([]);
      } finally {
        await context.close();
      }
    });
  });
});
