/** The folder with initdb, pg_ctl, postgres and psql. */
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';

const debian = '/usr/lib/postgresql';
const oldest = 13;

/** The newest installed version, or exactly `version` when a cluster was made by it; null when there is none. */
export function findPrograms(version = null) {
  if (!existsSync(debian)) return null;
  const versions = readdirSync(debian)
    .map(Number)
    .filter((major) => major >= oldest && (version === null || major === version))
    // Debian's client package alone brings psql but no server.
    .filter((major) => existsSync(join(debian, String(major), 'bin', 'initdb')))
    .sort((a, b) => b - a);
  return versions.length === 0 ? null : { version: versions[0], folder: join(debian, String(versions[0]), 'bin') };
}
