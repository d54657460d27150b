/** Rate limits by address: strict where passwords and secrets are tried, wide elsewhere. */
import { rateLimit, type Options } from 'express-rate-limit';
import { PennyweightError } from '#contract/error.ts';

const limiter = (limit: number, sentence: string, more: Partial<Options> = {}) =>
  rateLimit({ windowMs: 60_000, limit, standardHeaders: 'draft-8', legacyHeaders: false, handler: (_req, _res, next) => next(new PennyweightError('too-many-requests', sentence)), ...more });

/** Only refused attempts count against the person. */
export const signInLimit = () => limiter(20, 'Too many attempts from this address: wait a minute and try again.', { skipSuccessfulRequests: true });
export const secretLimit = () => limiter(30, 'Too many attempts from this address: wait a minute and try again.');
export const apiLimit = () => limiter(6000, 'Too many requests from this address: wait a minute and try again.');
