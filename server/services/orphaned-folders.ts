/**
 * Folders of builds and releases that no row names: a worker was killed between publishing one and its transaction, or between the
 * transaction and the removal of the build before. Only for a worker that starts, when nothing is published. Folders of drafts that the
 * database does not know stay: it may have been restored from an older backup.
 */
import { draft, release } from '../db/schema/index.ts';
import type { App } from './context.ts';

/** Folders are named by their draft, see jobs/build.ts and jobs/release.ts. */
const uuidLength = 36;

export async function removeOrphanedFolders(app: App): Promise<number> {
  const drafts = await app.db.select({ id: draft.id, folder: draft.buildFolder }).from(draft);
  const known = new Set(drafts.map((row) => row.id));
  const named = {
    builds: new Set(drafts.map((row) => row.folder)),
    releases: new Set<string | null>((await app.db.select({ folder: release.folder }).from(release)).map((row) => row.folder)),
  };
  let removed = 0;
  for (const kind of ['builds', 'releases'] as const) {
    for (const folder of await app.storage.folders(kind)) {
      if (named[kind].has(folder) || !known.has(folder.slice(0, uuidLength))) continue;
      await app.storage.removeFolder(kind, folder);
      removed++;
    }
  }
  return removed;
}
