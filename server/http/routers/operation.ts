/** Health, desk, jobs, audit log, storage. */
import { pipeline } from 'node:stream/promises';
import { Readable } from 'node:stream';
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { auditCsv, listAudit } from '../../services/audit-log.ts';
import { mayVerify, verifyChain } from '../../services/audit-chain.ts';
import type { App } from '../../services/context.ts';
import { describeDesk } from '../../services/desk.ts';
import { describeHealth } from '../../services/health.ts';
import { cancelJob, getJob, listJobs } from '../../services/jobs.ts';
import { storageUsage } from '../../services/storage-usage.ts';
import { mount } from '../mount.ts';

export function operationRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.getHealth, () => describeHealth(app));
  mount(router, app, routes.getDesk, ({ caller }) => describeDesk(app, caller));
  mount(router, app, routes.listJobs, async ({ caller, query }) => ({ jobs: await listJobs(app, caller, query) }));
  mount(router, app, routes.getJob, ({ caller, params }) => getJob(app, caller, params.job));
  mount(router, app, routes.cancelJob, ({ caller, params }) => cancelJob(app, caller, params.job));
  mount(router, app, routes.verifyAudit, ({ caller }) => {
    mayVerify(caller);
    return verifyChain(app.db);
  });
  mount(router, app, routes.listAudit, ({ caller, query }) => listAudit(app, caller, query));
  mount(router, app, routes.exportAudit, async ({ caller, query, res }) => {
    const lines = auditCsv(app, caller, query);
    // The first page is asked for before the head goes out, so that a refusal is still a problem document.
    const first = await lines.next();
    res.status(200).type('text/csv').attachment('audit-log.csv');
    await pipeline(Readable.from((async function* () { if (!first.done) yield first.value; yield* lines; })()), res);
  });
  mount(router, app, routes.getStorage, ({ caller }) => storageUsage(app, caller));
  return router;
}
