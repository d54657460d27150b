/** Builds what has changed since the last build: dist/server (compiled) and dist/web (bundled). */
import { existsSync, mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { announce, seconds } from './announce.js';
import { buildServer } from './build-server.js';
import { checkout, dist } from './checkout.js';
import { run } from './command.js';
import { exclusively } from './exclusive.js';
import { SetupRefusal } from './refusal.js';
import { hashOf, readStamp } from './source-stamp.js';

async function buildWeb() {
  const vite = join(checkout, 'node_modules', 'vite', 'bin', 'vite.js');
  const { code, output } = await run(
    process.execPath,
    [vite, 'build', '--outDir', join(dist, 'web'), '--emptyOutDir', '--logLevel', 'warn'],
    {
      env: { ...process.env, NODE_ENV: 'production' },
    },
  );
  if (code !== 0)
    throw new SetupRefusal(`The pages could not be built; mend what Vite names and start again.\n${output}`);
}

const everywhere = ['package.json', 'package-lock.json', 'tsconfig.json'];
const halves = {
  server: { sources: [...everywhere, 'server', 'tsconfig.server.json'], result: 'server/main.js', build: buildServer },
  web: {
    sources: [...everywhere, 'src', 'server/contract', 'index.html', 'public', 'vite.config.ts'],
    result: 'web/index.html',
    build: buildWeb,
  },
};

/** Resolves when dist/ fits the sources; both halves are built side by side. */
export async function ensureBuilt() {
  await exclusively('build', async () => {
    const begun = performance.now();
    mkdirSync(dist, { recursive: true });
    const outdated = Object.entries(halves)
      .map(([name, half]) => ({ ...half, name, stamp: join(dist, `.${name}-sources`), hash: hashOf(half.sources) }))
      .filter(({ stamp, hash, result }) => readStamp(stamp) !== hash || !existsSync(join(dist, result)));
    if (outdated.length === 0) return;
    announce('build', `building ${outdated.map(({ name }) => name).join(' and ')}`);
    const builds = outdated.map(async ({ build, stamp, hash }) => {
      rmSync(stamp, { force: true });
      await build();
      writeFileSync(stamp, hash);
    });
    const failed = (await Promise.allSettled(builds)).find(({ status }) => status === 'rejected');
    if (failed) throw failed.reason;
    announce('build', `built in ${seconds(begun)}`);
  });
}
