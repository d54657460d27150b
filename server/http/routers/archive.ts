/** Archives, their readings, findings and records. */
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { archiveBeam, archiveSnapshot, archiveStatistics, archiveWeights } from '../../services/archive-record.ts';
import { getArchive, listArchives, putRunParameters, recheckArchive, withdrawArchive } from '../../services/archives.ts';
import { fileForDownload } from '../../services/archive-download.ts';
import type { App } from '../../services/context.ts';
import { listArchiveFindings, revokeWaiver, waiveFinding } from '../../services/findings.ts';
import { getArchiveReading, listSavedReadings, putArchiveReading, tryReading } from '../../services/readings.ts';
import { mount } from '../mount.ts';
import { sendStored } from '../send-stored.ts';

export function archiveRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.listArchives, ({ caller, params, query }) => listArchives(app, caller, params.campaign, query));
  mount(router, app, routes.getArchive, ({ caller, params }) => getArchive(app, caller, params.archive));
  mount(router, app, routes.withdrawArchive, ({ caller, params, body }) => withdrawArchive(app, caller, params.archive, body.reason));
  mount(router, app, routes.getArchiveReading, ({ caller, params }) => getArchiveReading(app, caller, params.archive));
  mount(router, app, routes.tryReading, ({ caller, params, body }) => tryReading(app, caller, params.archive, body.reading));
  mount(router, app, routes.putArchiveReading, ({ caller, params, body }) => putArchiveReading(app, caller, params.archive, body));
  mount(router, app, routes.putRunParameters, ({ caller, params, body }) => putRunParameters(app, caller, params.archive, body.parameters, body.reason));
  mount(router, app, routes.recheckArchive, ({ caller, params }) => recheckArchive(app, caller, params.archive));
  mount(router, app, routes.listSavedReadings, async ({ caller, params }) => ({ readings: await listSavedReadings(app, caller, params.campaign) }));
  mount(router, app, routes.listArchiveFindings, async ({ caller, params }) => ({ findings: await listArchiveFindings(app, caller, params.archive) }));
  mount(router, app, routes.getArchiveStatistics, ({ caller, params }) => archiveStatistics(app, caller, params.archive));
  mount(router, app, routes.getArchiveBeam, ({ caller, params, query }) => archiveBeam(app, caller, params.archive, query.rule));
  mount(router, app, routes.getArchiveWeights, ({ caller, params }) => archiveWeights(app, caller, params.archive));
  mount(router, app, routes.getArchiveSnapshot, ({ caller, params, query }) => archiveSnapshot(app, caller, params.archive, query.field, query.index));
  mount(router, app, routes.getArchiveFile, async ({ caller, params, res }) => {
    const file = await fileForDownload(app, caller, params.archive, params.position);
    await sendStored(res, file);
  });
  mount(router, app, routes.waiveFinding, ({ caller, params, body }) => waiveFinding(app, caller, params.finding, body.reason));
  mount(router, app, routes.revokeWaiver, ({ caller, params }) => revokeWaiver(app, caller, params.finding));
  return router;
}
