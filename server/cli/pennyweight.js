#!/usr/bin/env node
/** Launcher: the compiled command when it is there and no source of the command is newer, else the sources through tsx. */
import { existsSync, readdirSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const here = dirname(fileURLToPath(import.meta.url));
const compiled = join(here, '..', '..', 'dist', 'server', 'cli', 'main.js');

function newest(folder) {
  return Math.max(
    0,
    ...readdirSync(folder, { withFileTypes: true }).map((entry) =>
      entry.isDirectory() ? newest(join(folder, entry.name)) : statSync(join(folder, entry.name)).mtimeMs,
    ),
  );
}

async function load() {
  if (existsSync(compiled) && statSync(compiled).mtimeMs >= newest(here)) return import(pathToFileURL(compiled).href);
  const { register } = await import('tsx/esm/api');
  register();
  return import(pathToFileURL(join(here, 'main.ts')).href);
}

const { main } = await load();
await main(process.argv.slice(2));
