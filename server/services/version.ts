/** The program's version, from the checkout's package.json: two levels above the sources, three above dist/. */
import { createRequire } from 'node:module';
import { PennyweightError } from '#contract/error.ts';

function versionOfCheckout(): string {
  const require = createRequire(import.meta.url);
  for (const place of ['../../package.json', '../../../package.json']) {
    const description = require(place) as { name?: string; version?: string };
    if (description.name === 'pennyweight' && description.version) return description.version;
  }
  throw new PennyweightError('internal', 'The package.json of Pennyweight is missing.');
}

export const version = versionOfCheckout();
