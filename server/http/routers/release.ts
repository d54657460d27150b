/** Releases and pulls. */
import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Router } from 'express';
import { routes } from '#contract/routes.ts';
import { builtBeam, builtOfRelease, builtValues } from '../../services/built-values.ts';
import type { App } from '../../services/context.ts';
import { fileForPull, matrixForPull } from '../../services/pulls.ts';
import { getRelease, listPulls, withdrawRelease } from '../../services/releases.ts';
import { mount } from '../mount.ts';
import { sendStored } from '../send-stored.ts';

export function releaseRouter(app: App): Router {
  const router = Router();
  mount(router, app, routes.getRelease, ({ caller, params }) => getRelease(app, caller, params));
  mount(router, app, routes.getReleaseBeam, async ({ caller, params }) => builtBeam(await builtOfRelease(app, caller, params)));
  mount(router, app, routes.getReleaseValues, async ({ caller, params, query }) => builtValues(await builtOfRelease(app, caller, params), query));
  mount(router, app, routes.getReleaseFile, async ({ caller, params, req, res }) => {
    const path = Array.isArray(params.path) ? params.path.join('/') : params.path;
    const kind = req.method === 'HEAD' ? 'size' : /^bytes=0*[1-9]\d*-/.test(req.headers.range ?? '') ? 'rest' : 'bytes';
    await sendStored(res, await fileForPull(app, caller, params, path, kind));
  });
  mount(router, app, routes.getReleaseMatrix, async ({ caller, params, query, req, res }) => {
    const slice = await matrixForPull(app, caller, params, query, req.method === 'HEAD' ? 'size' : 'bytes');
    res.status(200).attachment(slice.name);
    res.setHeader('content-type', 'application/octet-stream');
    res.setHeader('content-length', slice.bytes);
    if (req.method === 'HEAD') {
      res.end();
      return;
    }
    await pipeline(Readable.from(slice.chunks()), res).catch((error: NodeJS.ErrnoException) => {
      if (error.code !== 'ERR_STREAM_PREMATURE_CLOSE') throw error;
    });
  });
  mount(router, app, routes.withdrawRelease, ({ caller, params, body }) => withdrawRelease(app, caller, params, body.reason));
  mount(router, app, routes.listPulls, async ({ caller, params }) => ({ pulls: await listPulls(app, caller, params) }));
  return router;
}
