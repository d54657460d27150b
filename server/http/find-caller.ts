/** Puts the caller on the request, and refuses changes that another site makes with the person's cookie. */
import { randomUUID } from 'node:crypto';
import type { RequestHandler } from 'express';
import { PennyweightError } from '#contract/error.ts';
import type { Auth } from '../access/auth.ts';
import { findCaller } from '../access/caller.ts';
import type { App } from '../services/context.ts';

export const requestIds: RequestHandler = (req, res, next) => {
  req.requestId = randomUUID();
  req.headers['x-request-id'] = req.requestId;
  res.setHeader('x-request-id', req.requestId);
  next();
};

export function callers(app: App, auth: Auth): RequestHandler {
  return async (req, _res, next) => {
    const found = await findCaller(app.db, auth, req.headers, req.requestId ?? null);
    if (found && 'caller' in found) req.caller = found.caller;
    if (found && 'problem' in found) req.callerProblem = found.problem;
    next();
  };
}

const unsafe = new Set(['POST', 'PUT', 'PATCH', 'DELETE']);

/** Cookies travel by themselves, tokens do not: a change by cookie must come from our own pages (Origin, Fetch Metadata). */
export function sameOrigin(app: App): RequestHandler {
  const ours = new URL(app.config.url).origin;
  return (req, _res, next) => {
    const { origin } = req.headers, site = req.headers['sec-fetch-site'];
    const foreign = (origin !== undefined && origin !== ours) || (site !== undefined && site !== 'same-origin' && site !== 'none');
    if (unsafe.has(req.method) && req.headers.cookie && !req.headers.authorization && foreign) {
      throw new PennyweightError('not-allowed', `This request came from another site${origin ? ` (${origin})` : ''}: open Pennyweight at ${ours} and try again.`);
    }
    next();
  };
}
