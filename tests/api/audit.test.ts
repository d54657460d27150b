/** The audit log: append-only in the database itself, one chain, filters, CSV, and its verification outside the database. */
import pg from 'pg';
import { afterAll, beforeAll, describe, expect, inject, it } from 'vitest';
import { routes } from '#contract/routes.ts';
import { verifyChain } from '../../server/services/audit-chain.ts';
import { createTestApp, unique, type Person, type TestApp } from '../setup/app.ts';

let app: TestApp;
let auditor: Person;
beforeAll(async () => {
  app = await createTestApp();
  auditor = await app.makePerson({ organisation: ['auditor'] }, 'Auditor');
});
afterAll(() => app.close());

const sql = (text: string, values: unknown[] = []) => app.parts.db.$client.query(text, values);

/** Runs statements as the superuser, who alone can switch triggers off. */
async function asSuperuser<T>(work: (client: pg.Client) => Promise<T>): Promise<T> {
  const address = new URL(inject('testDatabases').adminUrl);
  address.pathname = new URL(app.database.url).pathname;
  const client = new pg.Client({ connectionString: address.href });
  await client.connect();
  try {
    await client.query('set session_replication_role = replica');
    return await work(client);
  } finally {
    await client.end();
  }
}

describe('the database itself', () => {
  it.each(['update audit_log set label = label', 'delete from audit_log', 'truncate audit_log'])('refuses: %s', async (statement) => {
    const { rows: [{ count }] } = await sql('select count(*) from audit_log');
    await expect(sql(statement)).rejects.toMatchObject({ code: '23001' });
    expect((await sql('select count(*) from audit_log')).rows[0].count).toBe(count);
  });

  it('numbers and chains an entry whatever the program says', async () => {
    const values = `(999999, '2001-01-01', 'x', 'set-up', 'probe.forge', 'probe', 'p', 'p', 'forged', 'forged')`;
    await sql(`insert into audit_log (seq, at, actor_name, via, action, object_type, object_id, label, prev_hash, hash) values ${values}`);
    const { rows } = await sql('select seq, at, prev_hash, hash from audit_log order by seq desc limit 2');
    expect(Number(rows[0].seq)).toBe(Number(rows[1].seq) + 1);
    expect(rows[0].prev_hash).toBe(rows[1].hash);
    expect(rows[0].at.getFullYear()).toBeGreaterThan(2001);
    expect(await verifyChain(app.parts.db)).toMatchObject({ intact: true });
  });
});

describe('the chain', () => {
  it('stays whole under 20 changes at the same time', async () => {
    const before = await verifyChain(app.parts.db);
    const campaigns = Array.from({ length: 20 }, () => ({ slug: unique('campaign'), title: 'Parallel "quotes", ünïcode and \u2028' }));
    const answers = await Promise.all(campaigns.map((body) => app.founder.send(routes.createCampaign, { body })));
    expect(answers.map((answer) => answer.status)).toEqual(Array(20).fill(201));
    const after = await auditor.call(routes.verifyAudit);
    expect(after).toMatchObject({ intact: true, brokenAt: null, entries: before.entries + 20 });
    expect(after.head).toMatch(/^[0-9a-f]{64}$/);
    expect(after.head).not.toBe(before.head);
  });

  it('keeps nothing of a change that failed', async () => {
    const before = await verifyChain(app.parts.db);
    const { slug } = await app.makeCampaign();
    expect((await app.founder.send(routes.createCampaign, { body: { slug, title: 'Again' } })).status).toBe(409);
    expect((await verifyChain(app.parts.db)).entries).toBe(before.entries + 1);
  });

  const wounds: [what: string, statement: string, undo: string][] = [
    ['an altered reason', `update audit_log set reason = coalesce(reason, '') || '!' where seq = $1`, `update audit_log set reason = nullif(left(reason, -1), '') where seq = $1`],
    ['an altered time', `update audit_log set at = at + interval '1 microsecond' where seq = $1`, `update audit_log set at = at - interval '1 microsecond' where seq = $1`],
    ['altered content', `update audit_log set after = '{"roles": ["administrator"]}', hash = hash where seq = $1`, ''],
  ];
  it.each(wounds)('that was wounded by %s is found, with the number of the entry', async (_, statement, undo) => {
    const number = 3;
    const { rows: [kept] } = await sql('select after from audit_log where seq = $1', [number]);
    await asSuperuser((client) => client.query(statement, [number]));
    const verdict = await auditor.call(routes.verifyAudit);
    expect(verdict).toMatchObject({ intact: false, brokenAt: number, entries: number - 1 });
    expect(verdict.message).toContain(`Entry ${number}`);
    await asSuperuser((client) => (undo ? client.query(undo, [number]) : client.query('update audit_log set after = $2 where seq = $1', [number, JSON.stringify(kept.after)])));
    expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: true });
  });

  it('from which an entry was taken is found', async () => {
    await asSuperuser(async (client) => {
      await client.query('create temp table taken as select * from audit_log where seq = 4');
      await client.query('delete from audit_log where seq = 4');
      expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: false, brokenAt: 4, entries: 3 });
      await client.query('insert into audit_log select * from taken');
    });
    expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: true });
  });

  it('in which a forger hashed an entry anew is given away by the entry after it', async () => {
    await asSuperuser(async (client) => {
      await client.query('create temp table kept as select * from audit_log where seq = 4');
      await client.query(`update audit_log set actor_name = 'Somebody else' where seq = 4`);
      await client.query(`update audit_log set hash = encode(sha256(convert_to(prev_hash || E'\n' || jsonb_build_array(seq, to_char(at at time zone 'UTC', 'YYYY-MM-DD"T"HH24:MI:SS.US"Z"'), actor_id, actor_name, via,
        action, object_type, object_id, label, campaign_id, before, after, reason, request_id)::text, 'UTF8')), 'hex') where seq = 4`);
      expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: false, brokenAt: 5, entries: 4 });
      await client.query('delete from audit_log where seq = 4');
      await client.query('insert into audit_log select * from kept');
    });
    expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: true });
  });

  it('that was cut short or hashed anew from somewhere on is told from the head that was noted before', async () => {
    const noted = await verifyChain(app.parts.db);
    const known = { seq: noted.entries, hash: noted.head };
    expect(await verifyChain(app.parts.db, known)).toMatchObject({ intact: true });
    await asSuperuser(async (client) => {
      await client.query(`create temp table kept as select * from audit_log where seq = ${noted.entries}`);
      await client.query('delete from audit_log where seq = $1', [noted.entries]);
      expect(await verifyChain(app.parts.db)).toMatchObject({ intact: true, entries: noted.entries - 1 });
      expect(await verifyChain(app.parts.db, known)).toMatchObject({ intact: false, brokenAt: noted.entries });
      await client.query('insert into audit_log select * from kept');
    });
    expect(await verifyChain(app.parts.db, { ...known, hash: 'e'.repeat(64) })).toMatchObject({ intact: false, brokenAt: noted.entries });
    expect(await verifyChain(app.parts.db, known)).toMatchObject({ intact: true });
  });
});

describe('the list', () => {
  it('filters and pages without losing or doubling an entry', async () => {
    const campaign = await app.makeCampaign({ title: 'Paged' });
    const person = await app.makePerson();
    for (let i = 0; i < 5; i += 1) await app.founder.call(routes.putMember, { params: { campaign: campaign.slug, account: person.id }, body: { roles: [i % 2 ? 'modeler' : 'steward'] } });
    const of = (query: object) => auditor.call(routes.listAudit, { query: { campaign: campaign.slug, ...query } });
    const whole = await of({});
    expect(whole.total).toBe(6);
    expect(whole.entries.map((entry) => entry.action)).toEqual([...Array(4).fill('member.change-roles'), 'member.add', 'campaign.open']);
    const seen: number[] = [];
    for (let before: number | undefined; ; ) {
      const { entries, total } = await of({ before, limit: 4 });
      expect(total).toBe(6);
      if (entries.length === 0) break;
      seen.push(...entries.map((entry) => entry.seq));
      before = entries.at(-1)!.seq;
    }
    expect(seen).toEqual(whole.entries.map((entry) => entry.seq));

    expect((await of({ action: 'member.add' })).total).toBe(1);
    expect((await of({ objectType: 'member', objectId: person.id })).total).toBe(5);
    expect((await of({ actor: app.founder.id })).total).toBe(6);
    expect((await of({ actor: person.id })).total).toBe(0);
    expect((await of({ q: 'CHANGE-rol' })).total).toBe(4);
    expect((await of({ q: '%' })).total).toBe(0);
    const opened = whole.entries.at(-1)!.at;
    expect((await of({ to: opened })).total).toBeLessThanOrEqual(1);
    expect((await of({ from: new Date(Date.parse(opened) + 60_000).toISOString() })).total).toBe(0);
  });

  it('shows a steward their campaign only, and a contributor nothing', async () => {
    const [here, there] = [await app.makeCampaign(), await app.makeCampaign()];
    const steward = await app.makePerson({ [here.slug]: ['steward'] });
    const { entries } = await steward.call(routes.listAudit);
    expect(entries.length).toBeGreaterThan(0);
    expect(new Set(entries.map((entry) => entry.campaign))).toEqual(new Set([here.slug]));
    expect((await steward.call(routes.listAudit, { query: { campaign: there.slug } })).entries).toEqual([]);
    const contributor = await app.makePerson({ [here.slug]: ['contributor'] });
    expect((await contributor.send(routes.listAudit)).body).toMatchObject({ status: 403, code: 'not-allowed' });
    expect((await contributor.send(routes.exportAudit)).body).toMatchObject({ status: 403, code: 'not-allowed' });
  });
});

/** Reads RFC 4180: records end with CR LF, a quoted field may hold commas, quotes (doubled) and line ends. */
function readCsv(text: string): string[][] {
  const rows: string[][] = [];
  let row: string[] = [];
  const field = /("(?:[^"]|"")*"|[^",\r\n]*)(,|\r\n)/y;
  while (field.lastIndex < text.length) {
    const match = field.exec(text);
    expect(match, `not RFC 4180 at the end of: ${text.slice(0, field.lastIndex).slice(-60)}`).not.toBeNull();
    row.push(match![1].startsWith('"') ? match![1].slice(1, -1).replaceAll('""', '"') : match![1]);
    if (match![2] === '\r\n') {
      rows.push(row);
      row = [];
    }
  }
  return rows;
}

describe('the export', () => {
  it('is RFC 4180, and a spreadsheet runs nothing of it', async () => {
    const nasty = ['=HYPERLINK("https://elsewhere.example","x")', '+1+1', '-2+3', '@SUM(A1)', 'two\nlines, "quoted"'];
    const slugs: string[] = [];
    for (const title of nasty) slugs.push((await app.makeCampaign({ title })).slug);
    const response = await auditor.send(routes.exportAudit, { query: { action: 'campaign.open' } });
    expect(response.headers['content-type']).toContain('text/csv');
    expect(response.headers['content-disposition']).toContain('attachment');
    const [header, ...rows] = readCsv(response.text);
    expect(new Set(rows.map((row) => row.length))).toEqual(new Set([header.length]));
    const label = header.indexOf('label'), campaign = header.indexOf('campaign');
    const labels = slugs.map((slug) => rows.find((row) => row[campaign] === slug)![label]);
    expect(labels).toEqual(nasty.map((title) => (/^[=+\-@]/.test(title) ? `'${title}` : title)));
    for (const row of rows) for (const cell of row) expect(cell).not.toMatch(/^[=+\-@\t\r]/);
  });

  it('goes on over its pages', async () => {
    const { rows: [{ max }] } = await sql('select max(seq) from audit_log');
    await sql(`insert into audit_log (seq, at, actor_name, via, action, object_type, object_id, label, prev_hash, hash)
      select 0, now(), 'Seeder', 'set-up', 'probe.fill', 'probe', n::text, 'entry ' || n, '', '' from generate_series(1, 2345) n`);
    const response = await auditor.send(routes.exportAudit, { query: { action: 'probe.fill' } });
    const numbers = readCsv(response.text).slice(1).map((row) => Number(row[0]));
    expect(numbers).toEqual(Array.from({ length: 2345 }, (_, i) => Number(max) + 2345 - i));
    expect(await auditor.call(routes.verifyAudit)).toMatchObject({ intact: true });
  });
});
