/** Which folder a PostgreSQL cluster of this checkout lives in, and as which user its programs run. */
import { chmodSync, existsSync, mkdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { checkout, pathId, storage } from './checkout.js';
import { run, succeeds } from './command.js';
import { SetupRefusal } from './refusal.js';

// PostgreSQL refuses to run as root; Debian's server package brings this user.
const databaseUser = 'postgres';

function isUsed(folder) {
  return existsSync(join(folder, 'data', 'PG_VERSION'));
}

/** Folders above `folder` must be passable for the database's user: a clone below /root is not. */
function passable(folder) {
  return succeeds('runuser', ['-u', databaseUser, '--', 'test', '-x', folder], { cwd: '/' });
}

async function folderForRoot(name) {
  const near = join(storage, name);
  const far = join('/var/lib/pennyweight', pathId(checkout), name);
  const nearWorks = await passable(storage);
  // Data already kept in one of them must be found again, whatever the permissions above have become.
  if (isUsed(near) && !nearWorks) {
    throw new SetupRefusal(
      `The database's user "${databaseUser}" cannot reach ${near} any more: allow others to pass every folder above it (chmod o+x).`,
    );
  }
  if (isUsed(near) || (nearWorks && !isUsed(far))) return near;
  return far;
}

/** @returns {Promise<{ name: string, folder: string, user: string | null, label: string }>} */
export async function chooseHome(name) {
  const isRoot = process.getuid() === 0;
  if (isRoot && !(await succeeds('id', [databaseUser]))) {
    throw new SetupRefusal(
      `PostgreSQL must not run as root and there is no user "${databaseUser}": start Pennyweight as an ordinary user or install Debian's package postgresql.`,
    );
  }
  const folder = isRoot ? await folderForRoot(name) : join(storage, name);
  mkdirSync(folder, { recursive: true });
  if (isRoot) {
    // Root keeps the folder itself (passwords); the database's user owns only data/ and log/ in it.
    for (const step of ['/var/lib/pennyweight', join('/var/lib/pennyweight', pathId(checkout)), folder]) {
      if (folder.startsWith(step)) chmodSync(step, 0o711);
    }
  } else {
    try {
      chmodSync(folder, 0o700);
    } catch (cause) {
      throw new SetupRefusal(
        `${folder} belongs to another user, probably root: start Pennyweight as that user again.`,
        { cause },
      );
    }
  }
  const near = relative(checkout, folder);
  const label = near.startsWith('..') ? `${folder} (the database's user cannot enter this checkout)` : near;
  return { name, folder, user: isRoot ? databaseUser : null, label };
}

/** Makes a folder that the database's user owns alone. */
export async function makeDatabaseFolder(home, folder) {
  const owner = home.user === null ? [] : ['-o', home.user, '-g', home.user];
  const { code, output } = await run('install', ['-d', '-m', '700', ...owner, folder], { cwd: '/' });
  if (code !== 0) throw new SetupRefusal(`The database's folder ${folder} could not be made: ${output}`);
}

/** Runs one of PostgreSQL's programs as the right user, outside any folder that user cannot enter. */
export function runForDatabase(home, program, args, options = {}) {
  const words = home.user === null ? [program, ...args] : ['runuser', '-u', home.user, '--', program, ...args];
  return run(words[0], words.slice(1), { cwd: '/', ...options });
}
