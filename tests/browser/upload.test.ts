/** Sending in Chromium: pause and resume, a reload in mid-upload, a killed server; in the end the bytes are those of the file. */
import { createHash, randomFillSync } from 'node:crypto';
import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import type { Browser, CDPSession, Page } from 'playwright-core';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { startApplication, type RunningApplication } from '../setup/application.ts';
import { openChromium, shows, signIn } from './chromium.ts';

let application: RunningApplication;
let browser: Browser;
let folder: string;
let sha256: string;
const megabytes = 24;

/** An NPY file of random numbers, so that it is a valid archive too. */
function writeArchive(path: string): string {
  const values = megabytes * 2 ** 17, text = `{'descr': '<f8', 'fortran_order': False, 'shape': (${values / 1024}, 1024), }`;
  const header = Buffer.alloc(Math.ceil((10 + text.length + 1) / 64) * 64, ' ');
  Buffer.from([0x93, 0x4e, 0x55, 0x4d, 0x50, 0x59, 1, 0]).copy(header);
  header.writeUInt16LE(header.length - 10, 8);
  header.write(text, 10);
  header[header.length - 1] = 0x0a;
  const data = new Float64Array(values), noise = randomFillSync(new Uint32Array(values));
  for (let i = 0; i < values; i++) data[i] = noise[i] / 2 ** 32;
  const file = Buffer.concat([header, Buffer.from(data.buffer)]);
  writeFileSync(path, file);
  return createHash('sha256').update(file).digest('hex');
}

beforeAll(async () => {
  folder = mkdtempSync(join(tmpdir(), 'pennyweight-upload-'));
  sha256 = writeArchive(join(folder, 'noise.npy'));
  application = await startApplication({ demo: true });
  browser = await openChromium();
});

afterAll(async () => {
  await browser?.close();
  await application?.stop();
  rmSync(folder, { recursive: true, force: true });
});

/** A slow line, so that there is time to interrupt it. */
async function slowDown(page: Page): Promise<CDPSession> {
  const session = await page.context().newCDPSession(page);
  await session.send('Network.emulateNetworkConditions', { offline: false, latency: 5, downloadThroughput: -1, uploadThroughput: 6 * 2 ** 20 });
  return session;
}

async function received(page: Page): Promise<number> {
  const { deliveries } = await (await page.request.get(`${application.url}/api/campaigns/saltmere-basin/deliveries`)).json();
  return deliveries[0]?.files[0]?.received ?? 0;
}

describe('an interrupted upload', () => {
  it('goes on after a pause, a reload and a killed server, and arrives whole', async () => {
    const page = await signIn(application, await browser.newContext(), 'contributor');
    await page.goto(`${application.url}/campaigns/saltmere-basin/hand-in`);
    const line = await slowDown(page);
    await page.locator('input[type=file]').first().setInputFiles(join(folder, 'noise.npy'));
    await page.getByLabel(/^SHA-256 of noise.npy/).fill(sha256);
    await page.getByLabel('Run', { exact: true }).fill('noise');
    await page.getByRole('button', { name: 'Hand in' }).click();
    await expect.poll(() => received(page), { timeout: 20_000 }).toBeGreaterThan(0);
    await page.getByRole('button', { name: 'Pause' }).click();
    await page.getByRole('button', { name: 'Resume' }).waitFor();
    const paused = await received(page);
    await page.waitForTimeout(700);
    expect(await received(page)).toBe(paused);
    await page.getByRole('button', { name: 'Resume' }).click();
    await expect.poll(() => received(page), { timeout: 20_000 }).toBeGreaterThan(paused);

    page.on('dialog', (dialog) => void dialog.accept());
    await page.reload();
    await shows(page, /Sending was interrupted/);
    const reloaded = await received(page);
    expect(reloaded).toBeGreaterThan(0);
    expect(reloaded).toBeLessThan(megabytes * 2 ** 20);
    await page.locator('input[type=file]').last().setInputFiles(join(folder, 'noise.npy'));
    await expect.poll(() => received(page), { timeout: 20_000 }).toBeGreaterThan(reloaded);

    await application.kill('web');
    await page.waitForTimeout(1500);
    await application.start('web');
    await line.send('Network.emulateNetworkConditions', { offline: false, latency: 0, downloadThroughput: -1, uploadThroughput: -1 });
    await shows(page, 'received and verified', 60_000);
    await page.getByRole('link', { name: 'See the archive' }).click();
    await page.getByRole('link', { name: 'Files and run' }).click();
    await shows(page, sha256.slice(0, 10));
  });

  it('is refused with one sentence when the checksum is another, and nothing becomes visible', async () => {
    const page = await signIn(application, await browser.newContext(), 'contributor');
    await page.goto(`${application.url}/campaigns/saltmere-basin/hand-in`);
    await page.locator('input[type=file]').first().setInputFiles(join(folder, 'noise.npy'));
    await page.getByLabel(/^SHA-256 of noise.npy/).fill('0'.repeat(64));
    await page.getByLabel('Run', { exact: true }).fill('damaged');
    await page.getByRole('button', { name: 'Hand in' }).click();
    await shows(page, /SHA-256/);
    await expect.poll(async () => (await (await page.request.get(`${application.url}/api/campaigns/saltmere-basin/deliveries`)).json()).deliveries[0]?.state, { timeout: 30_000 }).toBe('refused');
    const { archives } = await (await page.request.get(`${application.url}/api/campaigns/saltmere-basin/archives?q=damaged`)).json();
    expect(archives).toEqual([]);
  });
});
