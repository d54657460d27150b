#!/usr/bin/env node
/** Launcher: the compiled command when it is there and none of its sources is newer, else the sources through tsx. */
import { existsSync, readdirSync, statSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { fileURLToPath, pathToFileURL } from 'node:url';

const here = dirname(fileURLToPath(import.meta.url));
const server = join(here, '..');
const compiled = join(server, '..', 'dist', 'server', 'cli', 'main.js');
/** The rooms that the command is made of. */
const rooms = ['cli', 'contract', 'engine', 'linalg', 'reading', 'services'].map((room) => join(server, room));

function newest(folder) {
  if (!existsSync(folder)) return 0;
  return Math.max(
    0,
    ...readdirSync(folder, { withFileTypes: true }).map((entry) =>
      entry.isDirectory() ? newest(join(folder, entry.name)) : statSync(join(folder, entry.name)).mtimeMs,
    ),
  );
}

async function load() {
  if (existsSync(compiled) && rooms.every((room) => newest(room) <= statSync(compiled).mtimeMs))
    return import(pathToFileURL(compiled).href);
  const { register } = await import('tsx/esm/api');
  register();
  return import(pathToFileURL(join(here, 'main.ts')).href);
}

const { main } = await load();
await main(process.argv.slice(2));
