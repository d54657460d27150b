/** Builds of drafts: asked for by a person, finished by the job in one transaction. */
import { eq } from 'drizzle-orm';
import { PennyweightError } from '#contract/error.ts';
import type { CheckPolicy, Finding } from '#contract/finding.ts';
import type { Summary } from '../engine/release/build-files.ts';
import { campaign, dataset, draft } from '../db/schema/index.ts';
import { recordAudit } from './audit.ts';
import type { App, Caller } from './context.ts';
import { inputsHash } from './draft-sources.ts';
import { replaceFindings } from './findings.ts';
import { mustStillRun } from './job-runs.ts';
import { mustBeEditable, type DraftRow } from './draft-states.ts';

export interface DraftToBuild {
  draft: DraftRow;
  policy: CheckPolicy;
  /** of what it is built; the build is stale when they differ later */
  inputs: string;
}

export async function draftToBuild(app: App, id: string): Promise<DraftToBuild> {
  const [found] = await app.db.select({ draft, policy: campaign.policy }).from(draft).innerJoin(campaign, eq(campaign.id, draft.campaignId)).where(eq(draft.id, id));
  if (!found) throw new PennyweightError('not-found', 'The draft is gone.');
  mustBeEditable(found.draft);
  return { ...found, inputs: await inputsHash(app.db, found.draft.recipe) };
}

export interface MadeBuild {
  recipeHash: string;
  inputs: string;
  summary: Summary;
  findings: Finding[];
  folder: string;
  jobId: string;
}

/** Makes a finished build the draft's; the folder of the one before goes. A job that was cancelled meanwhile finishes nothing. */
export async function finishBuild(app: App, caller: Caller, id: string, made: MadeBuild): Promise<void> {
  const drop = (name: string) => app.storage.removeFolder('builds', name);
  try {
    const old = await app.db.transaction(async (tx) => {
      await mustStillRun(tx, made.jobId);
      const [row] = await tx.select().from(draft).where(eq(draft.id, id)).for('update');
      mustBeEditable(row);
      const build = { ...made.summary, recipeSha256: made.recipeHash, builtAt: new Date().toISOString() };
      await tx.update(draft).set({ build, buildHash: made.inputs, buildFolder: made.folder, updatedAt: new Date() }).where(eq(draft.id, id));
      await replaceFindings(tx, { draftId: id }, row.campaignId, made.findings);
      const [parent] = await tx.select({ title: dataset.title }).from(dataset).where(eq(dataset.id, row.datasetId));
      await recordAudit(tx, caller, { action: 'draft.build', objectType: 'draft', objectId: id, label: `${parent.title}, draft ${row.number}`, campaignId: row.campaignId, before: { matrix: row.build?.matrixSha256 ?? null }, after: { matrix: build.matrixSha256, rows: build.rows, columns: build.columns, recipe: made.recipeHash, findings: made.findings.map((finding) => finding.id), job: made.jobId } });
      return row.buildFolder;
    });
    if (old && old !== made.folder) await drop(old);
  } catch (cause) {
    // A refusal comes before the commit. After a lost connection nobody knows, and the next worker clears what no draft names.
    if (cause instanceof PennyweightError) await drop(made.folder);
    throw cause;
  }
}
