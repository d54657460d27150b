/** The packages of package-lock.json in node_modules. */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { announce, seconds } from './announce.js';
import { checkout } from './checkout.js';
import { lastLines, run } from './command.js';
import { exclusively } from './exclusive.js';
import { SetupRefusal } from './refusal.js';
import { hashOf, readStamp } from './source-stamp.js';

function lockedPackages(...path) {
  try {
    return JSON.parse(readFileSync(join(checkout, ...path), 'utf8')).packages;
  } catch {
    return null;
  }
}

/**
 * npm leaves node_modules/.package-lock.json when an installation is complete: it must name every package of
 * package-lock.json in the same version, but for optional ones (those for other platforms) and extraneous ones.
 */
export function packagesFit(locked, installed) {
  if (!locked || !installed) return false;
  const complete = Object.entries(locked).every(([path, { version, optional, extraneous }]) => {
    if (path === '') return true;
    return path in installed ? installed[path].version === version : optional === true || extraneous === true;
  });
  return complete && Object.keys(installed).every((path) => path in locked);
}

const stamp = join(checkout, 'node_modules', '.pennyweight-installed');

/** Installed by us from this very lock, or by somebody else with the same result. */
function packagesAreCurrent() {
  const installed = lockedPackages('node_modules', '.package-lock.json');
  if (installed !== null && readStamp(stamp) === hashOf(['package-lock.json'])) return true;
  return packagesFit(lockedPackages('package-lock.json'), installed);
}

/** npm 10, which comes with Node.js 20, does not install Vite 8's optional platform packages from this lock: use npm 11. */
async function installer() {
  const { output } = await run('npm', ['--version']);
  return Number(output.split('.')[0]) >= 11 ? ['npm'] : ['npx', '--yes', 'npm@11'];
}

export async function ensureNodePackages() {
  if (packagesAreCurrent()) return;
  await exclusively('packages', async () => {
    if (packagesAreCurrent()) return;
    const begun = performance.now();
    const [program, ...args] = await installer();
    announce('packages', 'installing node_modules, this takes about a minute');
    const { code, output } = await run(program, [...args, 'ci', '--no-audit', '--no-fund']);
    if (code !== 0) {
      throw new SetupRefusal(
        `The packages could not be installed; see npm's words below, mend the cause and start again.\n${lastLines(output)}`,
      );
    }
    writeFileSync(stamp, hashOf(['package-lock.json']));
    announce('packages', `installed in ${seconds(begun)}`);
  });
}
