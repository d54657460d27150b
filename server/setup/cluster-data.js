/** The data folder of a cluster: made whole or not at all, never overwritten. */
import { chownSync, existsSync, readFileSync, readdirSync, renameSync, rmSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { makeDatabaseFolder, runForDatabase } from './cluster-home.js';
import { lastLines } from './command.js';
import { findPrograms } from './postgres-programs.js';
import { SetupRefusal } from './refusal.js';
import { newSecret, writePrivately } from './secret.js';

export const administrator = 'pennyweight_admin';

function isWhole(data) {
  return existsSync(join(data, 'PG_VERSION')) && existsSync(join(data, 'global', 'pg_control'));
}

/**
 * A data folder gets its name only when it is whole, so one that is not has lost files since. Tests lose nothing by
 * beginning anew; a person must decide.
 */
function refuseDamaged(data, { durable }) {
  if (!existsSync(data) || readdirSync(data).length === 0 || !durable) return;
  throw new SetupRefusal(
    `The database in ${data} is damaged, its global/pg_control or PG_VERSION is missing: restore the folder from a backup, or move it away to begin empty.`,
  );
}

async function initialise(home, programs, { durable }) {
  const data = join(home.folder, 'data');
  for (const name of readdirSync(home.folder)) {
    if (name.startsWith('data.new-')) rmSync(join(home.folder, name), { recursive: true, force: true });
  }
  refuseDamaged(data, { durable });
  const fresh = join(home.folder, `data.new-${process.pid}`);
  await makeDatabaseFolder(home, fresh);
  const password = newSecret();
  // initdb opens the file as the database's user, who may not look into the folder's other files.
  const passwordFile = join(home.folder, 'initdb-password');
  writePrivately(passwordFile, password);
  if (home.user !== null) {
    const { uid, gid } = statSync(fresh);
    chownSync(passwordFile, uid, gid);
  }
  try {
    const { code, output } = await runForDatabase(home, join(programs.folder, 'initdb'), [
      ...['-D', fresh, '-U', administrator, `--pwfile=${passwordFile}`, '-E', 'UTF8', '--locale=C.UTF-8'],
      ...['--auth-host=scram-sha-256', '--auth-local=scram-sha-256'],
      ...(durable ? ['--data-checksums'] : ['--no-sync']),
    ]);
    if (code !== 0) throw new SetupRefusal(`PostgreSQL could not make its data folder ${fresh}: ${lastLines(output)}`);
  } finally {
    rmSync(passwordFile, { force: true });
  }
  writePrivately(join(home.folder, 'admin-password'), password);
  rmSync(data, { recursive: true, force: true });
  renameSync(fresh, data);
}

/** Makes the data folder when there is none; resolves with the programs of the version that made it. */
export async function ensureData(home, options) {
  const data = join(home.folder, 'data');
  if (!isWhole(data)) {
    const programs = findPrograms();
    if (programs === null) {
      throw new SetupRefusal(
        "PostgreSQL is not installed: run npm start once, or install Debian's package postgresql.",
      );
    }
    await initialise(home, programs, options);
    return programs;
  }
  const version = Number(readFileSync(join(data, 'PG_VERSION'), 'utf8'));
  const programs = findPrograms(version);
  if (programs === null) {
    throw new SetupRefusal(
      `${data} was made by PostgreSQL ${version}, which is not installed: install Debian's package postgresql-${version}, or move the folder away to begin empty.`,
    );
  }
  return programs;
}
