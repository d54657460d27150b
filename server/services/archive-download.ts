/** A file of an archive, as it was handed in; every download is in the audit log. */
import { and, eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import { archiveFile } from '../db/schema/index.ts';
import { findArchive } from './archives.ts';
import { recordAudit } from './audit.ts';
import { authorise, type App, type Caller } from './context.ts';

export async function fileForDownload(app: App, caller: Caller, archiveId: string, position: number): Promise<{ path: string; name: string; sha256: string }> {
  const { row } = await findArchive(app, caller, archiveId);
  authorise(caller, 'pull', 'Archive', row);
  const [file] = await app.db.select().from(archiveFile).where(and(eq(archiveFile.archiveId, archiveId), eq(archiveFile.position, position)));
  if (!file) throw new PennyweightError('not-found', `The archive has no file number ${position}.`, { position });
  await recordAudit(app.db, caller, { action: 'archive.download', objectType: 'archive', objectId: archiveId, label: file.name, campaignId: row.campaignId, after: { sha256: file.sha256, bytes: file.bytes } });
  return { path: await app.storage.localPath(file.sha256), name: file.name, sha256: file.sha256 };
}
