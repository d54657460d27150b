/** The Express application, without listening. */
import { existsSync } from 'node:fs';
import type { ServerResponse } from 'node:http';
import { fileURLToPath } from 'node:url';
import express, { type Express } from 'express';
import helmet from 'helmet';
import { pinoHttp } from 'pino-http';
import { createAuth } from './access/auth.ts';
import { callers, requestIds, sameOrigin } from './http/find-caller.ts';
import { apiLimit, secretLimit, signInLimit } from './http/limits.ts';
import { answerErrors, noSuchRoute } from './http/refusals.ts';
import { accountRouter } from './http/routers/account.ts';
import { archiveRouter } from './http/routers/archive.ts';
import { campaignRouter } from './http/routers/campaign.ts';
import { datasetRouter } from './http/routers/dataset.ts';
import { deliveryRouter } from './http/routers/delivery.ts';
import { operationRouter } from './http/routers/operation.ts';
import { releaseRouter } from './http/routers/release.ts';
import { signInRouter } from './http/sign-in.ts';
import { uploadHandler } from './http/uploads.ts';
import type { App } from './services/context.ts';
import { recordSignIn } from './services/sign-in-audit.ts';

/** The built pages lie in dist/web, beside dist/server or below the source tree. */
function pagesFolder(): string | null {
  for (const place of ['../web', '../dist/web']) {
    const folder = fileURLToPath(new URL(place, import.meta.url));
    if (existsSync(`${folder}/index.html`)) return folder;
  }
  return null;
}

/** `pages`: the folder of the built pages; null while there are none (npm run dev serves them itself). */
/**
 * Arquero compiles its expressions with `new Function`. It runs in a worker for that, whose script carries a policy of its own: it may
 * compile, and may reach nothing else. Pages keep the strict one.
 */
function workerPolicy(res: ServerResponse, path: string): void {
  if (/\.worker-[^/]+\.js$/.test(path)) res.setHeader('content-security-policy', "default-src 'none'; script-src 'self' 'unsafe-eval'");
}

export function createApp(app: App, pages: string | null = pagesFolder()): Express {
  const web = express();
  const auth = createAuth({ ...app, record: (event, person, requestId) => recordSignIn(app, event, person, requestId) });
  const secure = app.config.url.startsWith('https://');
  web.disable('x-powered-by');
  web.set('trust proxy', 'loopback');
  web.use(requestIds);
  web.use(helmet({
    strictTransportSecurity: secure,
    contentSecurityPolicy: {
      directives: {
        'default-src': ["'self'"], 'script-src': ["'self'", "'wasm-unsafe-eval'"], 'style-src': ["'self'", "'unsafe-inline'"], 'img-src': ["'self'", 'data:', 'blob:'],
        'worker-src': ["'self'", 'blob:'], 'frame-ancestors': ["'none'"], 'object-src': ["'none'"], 'base-uri': ["'self'"], 'form-action': ["'self'"],
        'upgrade-insecure-requests': secure ? [] : null,
      },
    },
  }));
  web.use(pinoHttp({ logger: app.log, genReqId: (req) => (req as express.Request).requestId ?? '', autoLogging: { ignore: (req) => !req.url?.startsWith('/api/') }, customLogLevel: (_req, res) => (res.statusCode >= 500 ? 'error' : 'debug'), serializers: { req: (req: { id: string; method: string; url: string }) => ({ id: req.id, method: req.method, url: req.url.split('?')[0]?.replace(/\/api\/join\/.*/, '/api/join/…') }), res: (res: { statusCode: number }) => ({ status: res.statusCode }) } }));
  web.use('/api', apiLimit());
  web.use(['/api/auth/sign-in', '/api/auth/request-password-reset', '/api/auth/reset-password'], signInLimit());
  web.use('/api/join', secretLimit());
  web.use(signInRouter(app, auth));
  web.use('/api', callers(app, auth), sameOrigin(app));
  web.all('/api/uploads{/*id}', uploadHandler(app));
  web.use('/api', express.json({ limit: '2mb' }));
  for (const router of [accountRouter, campaignRouter, deliveryRouter, archiveRouter, datasetRouter, releaseRouter, operationRouter]) web.use(router(app));
  web.all('/api{/*any}', noSuchRoute);
  if (pages) {
    web.use('/assets', express.static(`${pages}/assets`, { immutable: true, maxAge: '1y', fallthrough: false, setHeaders: workerPolicy }));
    web.use(express.static(pages, { index: false, maxAge: 0 }));
    web.get('/{*spa}', (_req, res) => { res.sendFile(`${pages}/index.html`, { headers: { 'cache-control': 'no-cache' } }); });
  }
  web.use(answerErrors(app));
  return web;
}
