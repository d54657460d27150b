/** /api/auth: hands requests to better-auth and turns its refusals into problem documents of our vocabulary. */
import type { Request as Incoming, RequestHandler, Response as Outgoing } from 'express';
import { raw, Router } from 'express';
import { PennyweightError, statusOf, type ErrorCode } from '#contract/error.ts';
import { addressHeader, fromNodeHeaders, type Auth } from '../access/auth.ts';
import type { App } from '../services/context.ts';
import { problemFor } from './refusals.ts';

/** The library's codes that a person can meet, in our words. */
const sentences: Record<string, [ErrorCode, string]> = {
  INVALID_EMAIL_OR_PASSWORD: ['not-signed-in', 'The e-mail address or the password is not right: check both, or ask for a new password.'],
  INVALID_EMAIL: ['invalid-input', 'This is not an e-mail address: check it.'],
  INVALID_TOKEN: ['invalid-input', 'This link was used already or has expired: ask for a new one.'],
  PASSWORD_TOO_SHORT: ['invalid-input', 'The password is too short: use at least 12 characters.'],
  PASSWORD_TOO_LONG: ['invalid-input', 'The password is too long: use at most 128 characters.'],
  INVALID_ORIGIN: ['not-allowed', 'This request came from another site: open Pennyweight at its own address and try again.'],
};

const codeOf: Partial<Record<number, ErrorCode>> = { 401: 'not-signed-in', 403: 'not-allowed', 404: 'not-found', 429: 'too-many-requests' };

async function refusalOf(answer: Response): Promise<PennyweightError> {
  const { code = '', message = '' } = (await answer.json().catch(() => ({}))) as { code?: string; message?: string };
  if (Object.hasOwn(sentences, code)) return new PennyweightError(...sentences[code]);
  if (answer.status >= 500) return new PennyweightError('internal', 'Signing in failed here for a reason that was not foreseen: tell the administrator.');
  return new PennyweightError(codeOf[answer.status] ?? 'invalid-input', message ? `${message.replace(/\.$/, '')}.` : 'The sign-in service does not know this request: reload the page and try again.');
}

function asWebRequest(app: App, req: Incoming): Request {
  const headers = fromNodeHeaders(req.headers);
  headers.set(addressHeader, req.ip ?? '');
  const body = req.body as Buffer | undefined;
  return new Request(new URL(req.originalUrl, app.config.url), { method: req.method, headers, body: body && body.length > 0 ? new Uint8Array(body) : undefined });
}

async function send(app: App, req: Incoming, res: Outgoing, answer: Response): Promise<void> {
  for (const cookie of answer.headers.getSetCookie()) res.append('set-cookie', cookie);
  if (answer.status < 400) {
    for (const [name, value] of answer.headers) if (name !== 'set-cookie') res.setHeader(name, value);
    res.status(answer.status).send(Buffer.from(await answer.arrayBuffer()));
    return;
  }
  const refusal = await refusalOf(answer);
  if (refusal.code === 'internal') app.log.error({ requestId: req.requestId, status: answer.status }, 'sign-in service failed');
  res.status(statusOf[refusal.code]).type('application/problem+json').send(JSON.stringify(problemFor(refusal, req.requestId)));
}

/** Forms of a few fields: a larger body is refused before it is held in memory. */
export function signInRouter(app: App, auth: Auth): Router {
  const router = Router();
  const handle: RequestHandler = async (req, res) => send(app, req, res, await auth.handler(asWebRequest(app, req)));
  router.all('/api/auth/{*any}', raw({ type: () => true, limit: '64kb' }), handle);
  return router;
}
