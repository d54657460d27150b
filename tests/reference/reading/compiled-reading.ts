/**
 * server/reading compiled as the running server has it: proves that the reading process starts from JavaScript too, and
 * it starts several times faster than from source.
 */
import { execFileSync } from 'node:child_process';
import { mkdtempSync, rmSync, symlinkSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import type * as Isolated from '../../../server/reading/isolated.ts';

const checkout = process.cwd();

export async function compiledReading(): Promise<{ openIsolated: typeof Isolated.openIsolated; remove(): void }> {
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-compiled-'));
  symlinkSync(join(checkout, 'node_modules'), join(folder, 'node_modules'));
  const parts = ['server/reading/isolated.ts', 'server/reading/isolation/child.ts'];
  const settings = {
    extends: join(checkout, 'tsconfig.server.json'),
    compilerOptions: { outDir: folder, rootDir: checkout, typeRoots: [join(checkout, 'node_modules', '@types')] },
    include: [],
    files: parts.map((part) => join(checkout, part)),
  };
  writeFileSync(join(folder, 'tsconfig.json'), JSON.stringify(settings));
  writeFileSync(join(folder, 'package.json'), JSON.stringify({ private: true, type: 'module', imports: { '#contract/*.ts': './server/contract/*.js' } }));
  const compiler = join(checkout, 'node_modules', 'typescript7', 'bin', 'tsc');
  execFileSync(process.execPath, [compiler, '-p', join(folder, 'tsconfig.json')], { cwd: folder, stdio: 'pipe' });
  const url = pathToFileURL(join(folder, 'server', 'reading', 'isolated.js')).href;
  const { openIsolated } = (await import(/* @vite-ignore */ url)) as typeof Isolated;
  return { openIsolated, remove: () => rmSync(folder, { recursive: true, force: true }) };
}
