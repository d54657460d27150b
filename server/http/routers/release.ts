/** Releases and pulls. */
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { join } from 'node:path';
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { builtBeam, builtValues } from '../../services/built-values.ts';
import type { App, Caller } from '../../services/context.ts';
import { fileForPull, matrixForPull } from '../../services/pulls.ts';
import { findRelease, getRelease, listPulls, withdrawRelease, type ReleaseAddress } from '../../services/releases.ts';
import { mount } from '../mount.ts';
import { sendStored } from '../send-stored.ts';

async function built(app: App, caller: Caller, address: ReleaseAddress) {
  const { row } = await findRelease(app, caller, address);
  return { build: row.build, folder: join(app.storage.folder('releases', row.folder), 'data') };
}

export function releaseRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.getRelease, ({ caller, params }) => getRelease(app, caller, params));
  mount(router, app, routes.getReleaseBeam, async ({ caller, params }) => {
    const { build, folder } = await built(app, caller, params);
    return builtBeam(folder, build, null);
  });
  mount(router, app, routes.getReleaseValues, async ({ caller, params, query }) => {
    const { build, folder } = await built(app, caller, params);
    return builtValues(folder, build, query);
  });
  mount(router, app, routes.getReleaseFile, async ({ caller, params, req, res }) => {
    const path = Array.isArray(params.path) ? params.path.join('/') : params.path;
    // A range that does not begin at 0 goes on with a pull that is recorded already.
    const again = /^bytes=[1-9]\d*-/.test(req.headers.range ?? '');
    await sendStored(res, await fileForPull(app, caller, params, path, again));
  });
  mount(router, app, routes.getReleaseMatrix, async ({ caller, params, query, res }) => {
    const slice = await matrixForPull(app, caller, params, query);
    res.status(200).attachment(slice.name);
    res.setHeader('content-type', 'application/octet-stream');
    res.setHeader('content-length', slice.bytes);
    await pipeline(Readable.from(slice.chunks()), res).catch((error: NodeJS.ErrnoException) => {
      if (error.code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error;
    });
  });
  mount(router, app, routes.withdrawRelease, ({ caller, params, body }) => withdrawRelease(app, caller, params, body.reason));
  mount(router, app, routes.listPulls, async ({ caller, params }) => ({ pulls: await listPulls(app, caller, params) }));
  return router;
}
