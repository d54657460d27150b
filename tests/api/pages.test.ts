/** Serving the built pages: one document for every address of the client, files with a hash in their name kept for ever. */
import { mkdirSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createTestApp, type TestApp } from '../setup/app.ts';

const folder = mkdtempSync(join(tmpdir(), 'pennyweight-pages-'));
let app: TestApp;
beforeAll(async () => {
  mkdirSync(join(folder, 'assets'));
  writeFileSync(join(folder, 'index.html'), '<!doctype html><title>Pennyweight</title>');
  writeFileSync(join(folder, 'assets', 'index-Bq3x9.js'), 'export const value = 1;\n');
  app = await createTestApp({ pages: folder });
});
afterAll(async () => {
  await app.close();
  rmSync(folder, { recursive: true });
});

const get = (path: string) => app.visitor().http.get(path);

describe('the pages', () => {
  it.each(['/', '/campaigns/jet/archives', '/join/some-secret', '/a.b'])('answer %s with the one document, asked for anew each time', async (path) => {
    const { status, text, headers } = await get(path);
    expect(status).toBe(200);
    expect(text).toContain('<title>Pennyweight</title>');
    expect(headers['cache-control']).toBe('no-cache');
  });

  it('keep files with a hash in their name for ever', async () => {
    const { headers, text } = await get('/assets/index-Bq3x9.js');
    expect(text).toContain('value');
    expect(headers['content-type']).toContain('javascript');
    expect(headers['cache-control']).toContain('immutable');
  });

  it('never answer a script that is gone, or the API, with the document', async () => {
    for (const path of ['/assets/index-old.js', '/api/nothing']) {
      const { status, body } = await get(path);
      expect(status).toBe(404);
      expect(body.code).toBe('not-found');
    }
  });

  it('give nothing away from outside their folder', async () => {
    for (const path of ['/assets/..%2f..%2f..%2fetc%2fpasswd', '/..%2f..%2fetc%2fpasswd', '/assets/%00']) expect((await get(path)).text).not.toContain('root:');
  });
});
