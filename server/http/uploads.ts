/** tus 1.0.0 at /api/uploads: resumable upload of announced files. Every request is checked against the caller. */
import type { Request, RequestHandler } from 'express';
import { Server } from '@tus/server';
import { tusPath } from '#contract/archive.ts';
import { PennyweightError, statusOf } from '#contract/error.ts';
import type { App, Caller } from '../services/context.ts';
import { admitUpload, fileForSending, finishFile } from '../services/uploads.ts';
import { UploadStore } from '../storage/upload-store.ts';
import { problemFor } from './refusals.ts';

interface TusRequest {
  headers: Headers;
  runtime?: { node?: { req: unknown } };
}

function callerOf(request: TusRequest): Caller {
  const req = request.runtime?.node?.req as Request;
  if (!req.caller) throw req.callerProblem ?? new PennyweightError('not-signed-in', 'Sign in first, or send a personal token with the scope "hand-in". What was received is kept.');
  return req.caller;
}

/** What the protocol's own refusals mean, by status. */
function translate(error: Error | { status_code: number; body: string }): PennyweightError {
  if (error instanceof PennyweightError) return error;
  const { status_code: status, body } = error as { status_code?: number; body?: string };
  switch (status) {
    case 404: case 410: return new PennyweightError('not-found', 'This upload is not known here any more: announce the delivery again.');
    case 409: return new PennyweightError('conflict', 'The upload is at another byte than the sender thinks (a second sender, or a lost answer): ask for its offset and go on from there.');
    case 413: return new PennyweightError('upload-too-long', 'More bytes were sent than announced: announce the delivery again with the right length.');
    case 400: case 403: case 412: case 415: case 501: return new PennyweightError('invalid-input', `The upload request is not valid: ${(body ?? '').trim()}.`);
    default:
      if ((error as NodeJS.ErrnoException).code === 'ENOSPC') return new PennyweightError('unavailable', 'The disk of the server is full: tell the administrator. What was received is kept.');
      return new PennyweightError('unavailable', 'The bytes could not be stored just now: try again. What was received is kept.', {}, { cause: error });
  }
}

const stores = new WeakMap<App, UploadStore>();

/** One store an application: it holds the running hashes. */
export function uploadStoreOf(app: App): UploadStore {
  const known = stores.get(app) ?? new UploadStore(app.storage.uploads());
  stores.set(app, known);
  return known;
}

export function uploadHandler(app: App): RequestHandler {
  const store = uploadStoreOf(app);
  const server = new Server({
    path: tusPath,
    datastore: store,
    relativeLocation: true,
    allowedOrigins: [new URL(app.config.url).origin],
    disableTerminationForFinishedUploads: true,
    namingFunction: async (request, metadata) => {
      const length = request.headers.get('upload-length');
      return (await admitUpload(app, callerOf(request), metadata, length === null ? null : Number(length))).id;
    },
    onIncomingRequest: async (request, id) => {
      await fileForSending(app, callerOf(request), id);
    },
    onUploadFinish: async (request, upload) => {
      await finishFile(app, callerOf(request), store, upload.id);
      return {};
    },
    onResponseError: (request, error) => {
      const refusal = translate(error);
      const req = request.runtime?.node?.req as Request | undefined;
      if (refusal.code === 'unavailable') app.log.warn({ err: refusal.cause, requestId: req?.requestId }, 'upload interrupted');
      return { status_code: statusOf[refusal.code], body: JSON.stringify(problemFor(refusal, req?.requestId)) };
    },
  });
  return async (req, res) => {
    // Refusals leave here as text; they are problem documents.
    const writeHead = res.writeHead.bind(res) as (...args: unknown[]) => typeof res;
    res.writeHead = ((status: number, ...rest: unknown[]) => {
      if (status >= 400) {
        const headers = rest[rest.length - 1];
        if (Array.isArray(headers)) {
          for (let i = 0; i < headers.length; i += 2) if (String(headers[i]).toLowerCase() === 'content-type') headers.splice(i, 2);
          headers.push('content-type', 'application/problem+json');
        } else res.setHeader('content-type', 'application/problem+json');
      }
      return writeHead(status, ...rest);
    }) as typeof res.writeHead;
    await server.handle(req, res);
  };
}
