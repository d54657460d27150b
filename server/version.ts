/** The program's version, from package.json (which lies one level higher beside dist/). */
import { readFileSync } from 'node:fs';

function read(): string {
  for (const place of ['../package.json', '../../package.json']) {
    try {
      const { name, version } = JSON.parse(readFileSync(new URL(place, import.meta.url), 'utf8')) as { name?: string; version?: string };
      if (name === 'pennyweight' && version) return version;
    } catch {
      // not there: the next place
    }
  }
  return '0.0.0';
}

export const version = read();
