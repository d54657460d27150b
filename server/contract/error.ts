/**
 * The one error vocabulary. Every refusal anywhere in Pennyweight is a PennyweightError with one of these codes;
 * on the wire it becomes an RFC 9457 problem document (application/problem+json).
 */
import { z } from 'zod';

export const errorCodes = [
  'invalid-input',
  'not-signed-in',
  'session-expired',
  'not-allowed',
  'token-scope',
  'own-work',
  'not-found',
  'conflict',
  'wrong-state',
  'stale-version',
  'quota-exceeded',
  'upload-too-long',
  'upload-incomplete',
  'upload-locked',
  'checksum-mismatch',
  'unsupported-format',
  'file-unreadable',
  'file-too-large',
  'limit-exceeded',
  'reading-incomplete',
  'reading-mismatch',
  'stamps-invalid',
  'weights-invalid',
  'rule-not-admissible',
  'matrix-invalid',
  'recipe-invalid',
  'open-findings',
  'range-invalid',
  'withdrawn',
  'job-cancelled',
  'too-many-requests',
  'unavailable',
  'internal',
] as const;

export const errorCode = z.enum(errorCodes);
export type ErrorCode = z.infer<typeof errorCode>;

/** HTTP status of each code. Exhaustive: a code without a status does not compile. */
export const statusOf: Record<ErrorCode, number> = {
  'invalid-input': 400,
  'not-signed-in': 401,
  'session-expired': 401,
  'not-allowed': 403,
  'token-scope': 403,
  'own-work': 403,
  'not-found': 404,
  conflict: 409,
  'wrong-state': 409,
  'stale-version': 409,
  'quota-exceeded': 413,
  'upload-too-long': 413,
  'upload-incomplete': 409,
  'upload-locked': 423,
  'checksum-mismatch': 422,
  'unsupported-format': 415,
  'file-unreadable': 422,
  'file-too-large': 413,
  'limit-exceeded': 422,
  'reading-incomplete': 422,
  'reading-mismatch': 422,
  'stamps-invalid': 422,
  'weights-invalid': 422,
  'rule-not-admissible': 422,
  'matrix-invalid': 422,
  'recipe-invalid': 422,
  'open-findings': 409,
  'range-invalid': 416,
  withdrawn: 410,
  'job-cancelled': 409,
  'too-many-requests': 429,
  unavailable: 503,
  internal: 500,
};

/** Where and why, for programs: path, index, time, expected, actual, ... */
export type ErrorDetails = Record<string, unknown>;

/** A refusal: `message` is one sentence for a person that says what was wrong, where, and what to do next. */
export class PennyweightError extends Error {
  override readonly name = 'PennyweightError';
  readonly code: ErrorCode;
  readonly details: ErrorDetails;

  constructor(code: ErrorCode, message: string, details: ErrorDetails = {}, options?: { cause?: unknown }) {
    super(message, options);
    this.code = code;
    this.details = details;
  }
}

/** RFC 9457 problem document. `code` and `details` are extension members; `issues` lists fields of a refused form. */
export const problem = z.object({
  type: z.string(),
  title: z.string(),
  status: z.number().int(),
  detail: z.string(),
  code: errorCode,
  details: z.record(z.string(), z.unknown()).optional(),
  issues: z.array(z.object({ path: z.string(), message: z.string() })).optional(),
  requestId: z.string().optional(),
});
export type Problem = z.infer<typeof problem>;
