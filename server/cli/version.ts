/** The version in the checkout's package.json, found from the sources and from the compiled command alike. */
import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { PennyweightError } from '#contract/error.ts';

export function version(): string {
  for (let folder = dirname(fileURLToPath(import.meta.url)); ; folder = dirname(folder)) {
    const file = join(folder, 'package.json');
    const description = existsSync(file)
      ? (JSON.parse(readFileSync(file, 'utf8')) as { name?: string; version?: string })
      : {};
    if (description.name === 'pennyweight' && description.version) return description.version;
    if (folder === dirname(folder))
      throw new PennyweightError('internal', 'The package.json of Pennyweight is missing.');
  }
}
