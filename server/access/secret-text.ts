/** Secrets that are shown once: random text, and the SHA-256 under which it is stored. */
import { createHash, randomBytes } from 'node:crypto';

/** 256 random bits as 43 URL-safe characters after the prefix. */
export function newSecret(prefix = ''): string {
  return prefix + randomBytes(32).toString('base64url');
}

export function hashOfSecret(secret: string): string {
  return createHash('sha256').update(secret).digest('hex');
}
