/**
 * Once a run: the tests' own cluster (storage/test-postgres), and in it a template database made by the real migrations,
 * which createTestDatabase() clones for each test file.
 */
import { randomBytes } from 'node:crypto';
import { migrate } from '../../server/db/migrate.ts';
import { administer, openCluster } from '../../server/setup/cluster.js';
import { applicationRole, ensureRole } from '../../server/setup/application-database.js';

/** What runs that were killed have left; while another run holds the cluster they may be its own. */
async function dropLeftovers(cluster) {
  if (cluster.wasHeld) return;
  const leftovers = `select datname from pg_database where datname like 'test\\_%' or datname like 'template\\_test\\_%'`;
  for (const name of (await administer(cluster, leftovers)).split('\n').filter(Boolean)) {
    await administer(cluster, `alter database ${name} is_template false;\ndrop database ${name} with (force);`);
  }
}

export default async function setup(project) {
  const cluster = await openCluster('test-postgres', { durable: false });
  const template = `template_test_${randomBytes(6).toString('hex')}`;
  try {
    await dropLeftovers(cluster);
    const urlOf = await ensureRole(cluster);
    await administer(cluster, `create database ${template} owner ${applicationRole};`);
    await migrate(urlOf(template));
    await administer(cluster, `alter database ${template} with is_template true allow_connections false;`);
    project.provide('testDatabases', {
      template,
      adminUrl: cluster.url('postgres'),
      applicationUrl: urlOf('postgres'),
    });
  } catch (error) {
    await cluster.close();
    throw error;
  }
  return async () => {
    await administer(cluster, `alter database ${template} is_template false;\ndrop database ${template} with (force);`);
    await cluster.close();
  };
}
