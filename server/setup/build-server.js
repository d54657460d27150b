/** Compiles server/ into dist/server. Also a command of its own: npm run build:server. */
import { cpSync, existsSync, mkdirSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { basename, extname, join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { checkout, dist } from './checkout.js';
import { run } from './command.js';
import { explain, SetupRefusal } from './refusal.js';

/** Files that the compiler does not carry over but the running server may read; the set-up itself stays where it is. */
function isCompanion(path) {
  return (
    !['.ts', '.tsx', '.md'].includes(extname(path)) &&
    path !== join(checkout, 'server', 'setup') &&
    !basename(path).startsWith('.')
  );
}

export async function buildServer() {
  const fresh = join(dist, 'server.new');
  rmSync(fresh, { recursive: true, force: true });
  mkdirSync(fresh, { recursive: true });
  const compiler = join(checkout, 'node_modules', 'typescript7', 'bin', 'tsc');
  const { code, output } = await run(process.execPath, [compiler, '-p', 'tsconfig.server.json', '--outDir', fresh]);
  if (code !== 0)
    throw new SetupRefusal(`The server does not compile; mend what the compiler names and start again.\n${output}`);
  cpSync(join(checkout, 'server'), join(fresh, 'server'), { recursive: true, filter: isCompanion });
  // Import maps of package.json belong to the nearest one: in dist the contract is JavaScript.
  const description = { private: true, type: 'module', imports: { '#contract/*.ts': './server/contract/*.js' } };
  writeFileSync(join(dist, 'package.json'), `${JSON.stringify(description, null, 2)}\n`);
  // A whole new folder, so that nothing of a file that is gone stays behind.
  const old = join(dist, 'server.old');
  rmSync(old, { recursive: true, force: true });
  if (existsSync(join(dist, 'server'))) renameSync(join(dist, 'server'), old);
  renameSync(join(fresh, 'server'), join(dist, 'server'));
  rmSync(old, { recursive: true, force: true });
  rmSync(fresh, { recursive: true, force: true });
}

if (process.argv[1] === fileURLToPath(import.meta.url)) {
  await buildServer().catch((error) => {
    process.stderr.write(`${explain(error)}\n`);
    process.exitCode = 1;
  });
}
