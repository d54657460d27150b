/** Errors on the wire: RFC 9457 problem documents with the code's status; unknown errors are logged and told without detail. */
import type { ErrorRequestHandler, RequestHandler } from 'express';
import { PennyweightError, statusOf, type Problem } from '#contract/error.ts';
import type { App } from '../services/context.ts';

const titles: Partial<Record<number, string>> = { 400: 'Not valid', 401: 'Not signed in', 403: 'Not allowed', 404: 'Not found', 409: 'Conflict', 410: 'Gone', 413: 'Too large', 415: 'Not supported', 416: 'Out of range', 422: 'Cannot be processed', 429: 'Too many requests', 503: 'Unavailable' };

export function problemFor(error: PennyweightError, requestId?: string): Problem {
  const status = statusOf[error.code];
  const { issues, ...details } = error.details as { issues?: Problem['issues'] };
  return {
    type: `urn:pennyweight:problem:${error.code}`, title: titles[status] ?? 'Failed', status, detail: error.message, code: error.code,
    ...(Object.keys(details).length > 0 ? { details } : {}), ...(Array.isArray(issues) ? { issues } : {}), ...(requestId ? { requestId } : {}),
  };
}

/** What Express and its parsers throw, in our vocabulary. */
function translate(error: unknown): PennyweightError | null {
  if (error instanceof PennyweightError) return error;
  const { type, status } = (error ?? {}) as { type?: string; status?: number };
  if (type === 'entity.parse.failed') return new PennyweightError('invalid-input', 'The body is not valid JSON.');
  if (type === 'entity.too.large') return new PennyweightError('file-too-large', 'The body of this request is too large: send archives by the upload route.');
  if (error instanceof URIError || status === 400) return new PennyweightError('invalid-input', 'The address is not valid.');
  if (status === 404) return new PennyweightError('not-found', 'There is no such page or file: reload the page.');
  if (status === 415) return new PennyweightError('unsupported-format', 'The body is in a character set or compression that is not read here: send UTF-8, plain or gzip.');
  // An answer that breaks its own contract (ZodError) is a fault of ours, like all else.
  return null;
}

export const noSuchRoute: RequestHandler = (req) => {
  throw new PennyweightError('not-found', `There is no ${req.method} ${req.path} in this API.`);
};

export function answerErrors(app: App): ErrorRequestHandler {
  return (error: unknown, req, res, next) => {
    const known = translate(error);
    if (!known) app.log.error({ err: error, requestId: req.requestId, method: req.method, path: req.path }, 'unexpected error');
    const refusal = known ?? new PennyweightError('internal', `Something went wrong here that was not foreseen. It was logged under request ${req.requestId ?? 'unknown'}; tell the administrator.`);
    if (res.headersSent) return next(error);
    res.status(statusOf[refusal.code]).type('application/problem+json').send(JSON.stringify(problemFor(refusal, req.requestId)));
  };
}
