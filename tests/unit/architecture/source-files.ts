/** The project's own source files, for the tests of its architecture. */
import { readFileSync, readdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';

export const checkout = fileURLToPath(new URL('../../..', import.meta.url));

export interface SourceFile {
  path: string;
  text: string;
  lines: number;
}

const isSource = /\.(ts|tsx|js|cjs|css|sql|py)$/;

export function sourceFiles(...rooms: string[]): SourceFile[] {
  return rooms
    .flatMap((room) => readdirSync(join(checkout, room), { recursive: true, withFileTypes: true }))
    .filter((entry) => entry.isFile() && isSource.test(entry.name))
    .map((entry) => {
      const text = readFileSync(join(entry.parentPath, entry.name), 'utf8');
      return { path: relative(checkout, join(entry.parentPath, entry.name)), text, lines: text.split('\n').length - 1 };
    });
}
