/** The cluster that npm start and npm test stand on, in a folder of its own: what may have happened to it since last time. */
import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, readFileSync, readdirSync, renameSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, describe, expect, it } from 'vitest';
import { ensureDatabase, whyUnreachable } from '../../../server/setup/application-database.js';
import { administer, openCluster } from '../../../server/setup/cluster.js';

const name = `probe-postgres-${process.pid}`;
const open = () => openCluster(name, { durable: false });
let folder = null;

async function withCluster(work) {
  const cluster = await open();
  folder = cluster.home.folder;
  try {
    return await work(cluster);
  } finally {
    await cluster.close();
  }
}

function postmaster() {
  return Number(readFileSync(join(folder, 'data', 'postmaster.pid'), 'utf8').split('\n')[0]);
}

async function died(pid) {
  process.kill(pid, 'SIGKILL');
  while (existsSync(`/proc/${pid}/cmdline`) && readFileSync(`/proc/${pid}/cmdline`, 'utf8') !== '') {
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
}

const countRows = (cluster) => administer(cluster, 'select count(*) from kept;');

afterAll(() => {
  if (folder !== null) rmSync(folder, { recursive: true, force: true });
});

describe('a cluster of this checkout', () => {
  it('is made, listens on the loopback only and keeps its data', async () => {
    await withCluster(async (cluster) => {
      expect(cluster.wasRunning).toBe(false);
      await administer(cluster, 'create table kept as select 1 as n;');
      expect(await administer(cluster, 'show listen_addresses;')).toBe('127.0.0.1');
      expect(await administer(cluster, 'show unix_socket_directories;')).toBe('');
    });
    expect(existsSync(join(folder, 'data', 'postmaster.pid'))).toBe(false);
    await withCluster(async (cluster) => expect(await countRows(cluster)).toBe('1'));
  });

  it('hides its data and its passwords from other users', () => {
    for (const path of ['data', 'admin-password']) expect(statSync(join(folder, path)).mode & 0o077).toBe(0);
  });

  it('is shared, and stops with the last who holds it', async () => {
    const first = await open();
    const second = await open();
    expect(second.wasRunning).toBe(true);
    expect(second.wasHeld).toBe(true);
    await first.close();
    expect(await countRows(second)).toBe('1');
    await second.close();
    expect(existsSync(join(folder, 'data', 'postmaster.pid'))).toBe(false);
  });

  it('is taken over from a holder that was killed', async () => {
    const module = fileURLToPath(new URL('../../../server/setup/cluster.js', import.meta.url));
    const script = `import { openCluster } from ${JSON.stringify(module)};
      await openCluster('${name}', { durable: false }); console.log('open'); setTimeout(() => {}, 60000);`;
    const child = spawn(process.execPath, ['--input-type=module', '-e', script]);
    await once(child.stdout, 'data');
    child.kill('SIGKILL');
    await once(child, 'close');
    await withCluster(async (cluster) => {
      expect(cluster.wasRunning).toBe(true);
      expect(cluster.wasHeld).toBe(false);
    });
    expect(existsSync(join(folder, 'data', 'postmaster.pid'))).toBe(false);
  });

  it('starts again after its server was killed', async () => {
    await withCluster(async (cluster) => {
      expect(await cluster.revive()).toEqual({ revived: false, moved: false });
      await died(postmaster());
      expect((await cluster.revive()).revived).toBe(true);
      expect(await countRows(cluster)).toBe('1');
    });
  });

  it('starts although the number of its dead server now belongs to another program', async () => {
    const cluster = await open();
    await died(postmaster());
    const file = join(folder, 'data', 'postmaster.pid');
    writeFileSync(file, readFileSync(file, 'utf8').replace(/^\d+/, String(process.pid)));
    await cluster.close();
    await withCluster(async (again) => {
      expect(again.wasRunning).toBe(false);
      expect(await countRows(again)).toBe('1');
    });
  });

  it('keeps its port, and takes another when that is taken', async () => {
    const portOf = (cluster) => Number(new URL(cluster.url('postgres')).port);
    const port = await withCluster(async (cluster) => portOf(cluster));
    expect(await withCluster(async (cluster) => portOf(cluster))).toBe(port);
    const other = createServer().listen(port, '127.0.0.1');
    await once(other, 'listening');
    try {
      expect(await withCluster(async (cluster) => portOf(cluster))).not.toBe(port);
    } finally {
      other.close();
    }
  });

  it('gives the application a database of its own and no more', async () => {
    await withCluster(async (cluster) => {
      const url = await ensureDatabase(cluster, 'probe');
      expect(await ensureDatabase(cluster, 'probe')).toBe(url);
      expect(await whyUnreachable(url)).toBeNull();
      expect(
        await administer(
          cluster,
          `select rolsuper or rolcreatedb or rolcreaterole from pg_roles where rolname = 'pennyweight';`,
        ),
      ).toBe('f');
      const wrong = new URL(url);
      wrong.password = 'wrong';
      expect(await whyUnreachable(wrong.href)).toContain('password authentication failed');
    });
  });

  it('says so when its data are damaged, and when nobody would miss them makes them anew', async () => {
    const control = join(folder, 'data', 'global', 'pg_control');
    renameSync(control, `${control}.gone`);
    await expect(openCluster(name)).rejects.toThrow(/is damaged.*restore the folder from a backup/);
    expect(existsSync(`${control}.gone`)).toBe(true);
    await withCluster(async (cluster) => {
      expect(await administer(cluster, `select count(*) from pg_database where datname = 'probe';`)).toBe('0');
    });
    expect(readdirSync(folder).filter((entry) => entry.startsWith('data'))).toEqual(['data']);
  });
});
