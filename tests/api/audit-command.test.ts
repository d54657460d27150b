/** pennyweight audit verify, on a real database. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { run } from '../../server/cli/main.ts';
import { createTestApp, type TestApp } from '../setup/app.ts';

let app: TestApp;
beforeAll(async () => {
  app = await createTestApp();
  await app.makeCampaign();
});
afterAll(() => app.close());

async function pennyweight(...args: string[]) {
  let out = '', err = '';
  const status = await run(['audit', ...args], { result: (text) => (out += `${text}\n`), message: (text) => (err += `${text}\n`), progress: () => undefined });
  return { status, out, err };
}
const verify = (...args: string[]) => pennyweight('verify', '--database', app.database.url, ...args);

describe('pennyweight audit verify', () => {
  it('finds a whole log whole, and prints what to note', async () => {
    const { status, out } = await verify();
    expect(status).toBe(0);
    const noted = out.trim().split('\n').at(-1)!;
    expect(noted).toMatch(/^\d+:[0-9a-f]{64}$/);
    await app.makeCampaign();
    expect((await verify('--noted', noted)).status).toBe(0);
    const forged = noted.replace(/.$/, (last) => (last === '0' ? '1' : '0'));
    const later = await verify('--noted', forged);
    expect(later.status).toBe(2);
    expect(later.out).toContain(`Entry ${noted.split(':')[0]}`);
  });

  it('prints one JSON object', async () => {
    const { status, out } = await verify('--json');
    expect(status).toBe(0);
    expect(JSON.parse(out)).toMatchObject({ intact: true, brokenAt: null });
  });

  it('tells wrong usage from a database that is not there', async () => {
    expect((await pennyweight('erase')).status).toBe(64);
    expect((await verify('--noted', 'x')).status).toBe(64);
    expect((await pennyweight('verify', '--database', 'not an address')).status).toBe(64);
    const unreachable = await pennyweight('verify', '--database', 'postgres://nobody@127.0.0.1:1/nothing');
    expect(unreachable.status).toBe(2);
    expect(unreachable.err).toContain('ECONNREFUSED');
    const foreign = await pennyweight('verify', '--database', app.database.url.replace(/\/[^/]*$/, '/postgres'));
    expect(foreign.status).toBe(2);
    expect(foreign.err).toContain('audit_log');
  });
});
