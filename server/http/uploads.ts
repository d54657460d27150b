/**
 * tus 1.0.0 at /api/uploads (https://tus.io/protocols/resumable-upload). Every request but OPTIONS needs a caller who announced
 * the file; every refusal is a problem document.
 */
import { Server } from '@tus/server';
import type { Request, RequestHandler } from 'express';
import { tusPath } from '#contract/archive.ts';
import { PennyweightError, statusOf, type ErrorCode } from '#contract/error.ts';
import type { App, Caller } from '../services/context.ts';
import { openUploadDoor } from '../services/uploads.ts';
import { problemFor } from './refusals.ts';

type ProtocolRequest = Parameters<Server['options']['onIncomingRequest'] & {}>[0];

const methods = new Set(['POST', 'HEAD', 'PATCH', 'DELETE', 'OPTIONS']);
/** How long a holder of a lock gets to store what it has when it is asked to let go, milliseconds. */
const drain = 500;
/** How long a sender is listened to after a refusal, so that it reads the refusal instead of a broken connection. */
const linger = 5_000;

/** What the protocol's library refuses, in our words; its own words say which part of the protocol was broken. */
const protocolRefusals: Partial<Record<number, { code: ErrorCode; sentence: string }>> = {
  404: { code: 'not-found', sentence: 'No such file was announced, or nothing was received of it yet.' },
  409: { code: 'conflict', sentence: 'The bytes do not go on where the file ends on the server: ask for its offset and go on from there.' },
  412: { code: 'invalid-input', sentence: 'This address speaks tus 1.0.0: send the header Tus-Resumable: 1.0.0.' },
  413: { code: 'upload-too-long', sentence: 'More bytes were sent than were announced: announce the file again with its true size. What fits is kept.' },
  501: { code: 'invalid-input', sentence: 'Send the length of the file with Upload-Length: a deferred length and concatenation are not accepted.' },
};

function toPennyweight(status: number, words: string): PennyweightError {
  const known = protocolRefusals[status];
  if (known) return new PennyweightError(known.code, known.sentence);
  if (status >= 500) return new PennyweightError('unavailable', 'The file could not be stored just now: what was received is kept; try again in a moment.');
  return new PennyweightError('invalid-input', `The upload request is not valid: ${words.trim().replace(/[.\s]+$/, '')}.`);
}

class UploadServer extends Server {
  /** Whatever the library answers with an error status goes out as a problem document. */
  override write(context: Parameters<Server['write']>[0], headers: Headers, status: number, body = ''): ReturnType<Server['write']> {
    if (status < 400) return super.write(context, headers, status, body);
    headers.set('Content-Type', 'application/problem+json');
    if (body.startsWith('{')) return super.write(context, headers, status, body);
    const problem = problemFor(toPennyweight(status, body));
    // "If the version is not supported, the Server MUST respond with 412 and MUST include the Tus-Version header."
    if (status === 412) {
      headers.set('Tus-Version', '1.0.0');
      problem.status = 412;
    }
    return super.write(context, headers, problem.status, JSON.stringify(problem));
  }
}

function expressRequest(req: ProtocolRequest): Request {
  return (req.runtime?.node?.req ?? {}) as Request;
}

function callerOf(req: ProtocolRequest): Caller {
  return expressRequest(req).caller as Caller;
}

export function uploadHandler(app: App): RequestHandler {
  const door = openUploadDoor(app);
  const server = new UploadServer({
    path: tusPath,
    datastore: door.store,
    locker: door.lock,
    lockDrainTimeout: drain,
    relativeLocation: true,
    // Only our own pages: without this the library allows every origin.
    allowedOrigins: [new URL(app.config.url).origin],
    namingFunction: (req, metadata) => {
      const length = req.headers.get('upload-length');
      return door.begin(callerOf(req), metadata ?? {}, length === null ? null : Number(length));
    },
    onIncomingRequest: async (req, id) => {
      const { method } = req;
      if (method === 'HEAD' || method === 'PATCH' || method === 'DELETE') await door.admit(callerOf(req), id, method);
    },
    onUploadFinish: async (req, upload) => {
      await door.finish(callerOf(req), upload.id);
      return {};
    },
    onResponseError: (req, error) => {
      const { requestId } = expressRequest(req);
      if ('status_code' in error && !(error instanceof PennyweightError)) return undefined;
      if (!(error instanceof PennyweightError)) app.log.error({ err: error, requestId }, 'unexpected error while receiving');
      const refusal = error instanceof PennyweightError ? error : new PennyweightError('unavailable', 'The file could not be stored just now: what was received is kept; try again in a moment.');
      return { status_code: statusOf[refusal.code], body: JSON.stringify(problemFor(refusal, requestId)) };
    },
  });
  return async (req, res) => {
    if (!methods.has(req.method)) throw new PennyweightError('not-found', 'Nothing can be fetched here: an archive is downloaded from its own page.');
    res.on('finish', () => {
      if (!req.complete) setTimeout(() => req.complete || req.destroy(), linger).unref();
    });
    if (req.method !== 'OPTIONS') {
      const { caller } = req;
      if (!caller) throw req.callerProblem ?? new PennyweightError('not-signed-in', 'Sign in first, or send a personal token as "Authorization: Bearer …".');
      if (caller.principal.token && !caller.principal.token.scopes.includes('hand-in')) {
        throw new PennyweightError('token-scope', 'This token lacks the scope "hand-in": make one that has it.', { needed: 'hand-in' });
      }
    }
    await server.handle(req, res);
  };
}
