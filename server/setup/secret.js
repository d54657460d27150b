/** Secrets that the set-up makes once and keeps in files only their owner reads. */
import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';

export function newSecret() {
  return randomBytes(32).toString('base64url');
}

/** Whole or not at all: a half-written secret would lock its owner out. */
export function writePrivately(file, text) {
  writeFileSync(`${file}.new`, text, { mode: 0o600 });
  renameSync(`${file}.new`, file);
}

export function keptSecret(file) {
  if (!existsSync(file)) writePrivately(file, newSecret());
  return readFileSync(file, 'utf8').trim();
}
