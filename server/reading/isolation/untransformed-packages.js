/**
 * For the reading process when it runs from source: hands h5wasm to Node.js as it stands. The TypeScript loader would
 * rewrite its 4 MB line and keep 600 MB for that (measured with tsx 4.23), which is the whole memory budget.
 */
import { readFile } from 'node:fs/promises';
import { register } from 'node:module';
import { fileURLToPath } from 'node:url';

export async function load(url, context, next) {
  if (!url.startsWith('file:') || !url.includes('/node_modules/h5wasm/')) return next(url, context);
  return { format: 'module', source: await readFile(fileURLToPath(url)), shortCircuit: true };
}

// Node.js evaluates this file twice: as --import in the process, which registers it, and as the hook itself.
if (process.execArgv.includes(import.meta.url)) register(`${import.meta.url}?hook`);
