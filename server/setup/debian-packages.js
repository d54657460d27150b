/** The parts of Debian that Pennyweight stands on: what each is for, how to see that it is there, how to install it. */
import { existsSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { announce, seconds, warn } from './announce.js';
import { logs } from './checkout.js';
import { lastLines, run, succeeds } from './command.js';
import { exclusively } from './exclusive.js';
import { findPrograms } from './postgres-programs.js';
import { SetupRefusal } from './refusal.js';

const python = '/usr/bin/python3';

function openblasIsThere() {
  return readdirSync('/usr/lib')
    .filter((folder) => folder.endsWith('-linux-gnu'))
    .some((folder) => existsSync(join('/usr/lib', folder, 'libopenblas.so.0')));
}

export const parts = {
  postgres: { packages: ['postgresql'], present: () => findPrograms() !== null, purpose: 'the database' },
  openblas: { packages: ['libopenblas0-pthread'], present: openblasIsThere, purpose: 'fast linear algebra' },
  chromium: { packages: ['chromium'], present: () => existsSync('/usr/bin/chromium'), purpose: 'the browser tests' },
  fonts: {
    packages: ['fonts-dejavu-core', 'fonts-liberation'],
    present: () => ['dejavu', 'liberation'].every((name) => existsSync(`/usr/share/fonts/truetype/${name}`)),
    purpose: 'the browser tests',
  },
  python: {
    packages: ['python3-h5py', 'python3-numpy', 'python3-scipy'],
    present: () => succeeds(python, ['-c', 'import h5py, numpy, scipy']),
    purpose: 'the reference tests',
  },
};

async function missing(names) {
  const found = [];
  for (const name of names) if (!(await parts[name].present())) found.push(name);
  return found;
}

/** The words before a command that has to run as root; null when we may not. */
async function asRoot() {
  if (process.getuid() === 0) return [];
  return (await succeeds('sudo', ['-n', 'true'])) ? ['sudo', '-n'] : null;
}

const clusterSettings = '/etc/postgresql-common/createcluster.d';

/**
 * Debian makes and starts a cluster "main" when the server package is installed; we need none. Existing clusters are
 * left alone, and so is the setting for later versions: the file goes again afterwards (pg_createcluster(1)).
 */
async function withoutMainCluster(prefix, install) {
  const file = `${clusterSettings}/pennyweight.conf`;
  const root = (program, args, input) => {
    const [first, ...rest] = [...prefix, program, ...args];
    return run(first, rest, { input, last: true });
  };
  await root('mkdir', ['-p', clusterSettings]);
  await root('tee', [file], 'create_main_cluster = false\n');
  try {
    return await install();
  } finally {
    await root('rm', ['-f', file]);
  }
}

async function aptGet(prefix, packages) {
  const call = (...args) => {
    const words = [
      ...prefix,
      'env',
      'DEBIAN_FRONTEND=noninteractive',
      'apt-get',
      '-y',
      '-o',
      'DPkg::Lock::Timeout=300',
      ...args,
    ];
    return run(words[0], words.slice(1));
  };
  const install = () => call('install', '--no-install-recommends', ...packages);
  return withoutMainCluster(prefix, async () => {
    let result = await install();
    // The package lists may be missing (a fresh machine) or name versions that are gone.
    if (result.code !== 0) {
      const update = await call('update');
      result = await install();
      result.output = `${update.output}\n${result.output}`;
    }
    writeFileSync(join(logs, 'apt.log'), result.output);
    return result;
  });
}

async function install(names, command) {
  const packages = names.flatMap((name) => parts[name].packages);
  const purposes = [...new Set(names.map((name) => parts[name].purpose))].join(', ');
  const advice = `have an administrator run "apt-get install ${packages.join(' ')}", then run ${command} again`;
  const prefix = await asRoot();
  if (prefix === null || !existsSync('/usr/bin/apt-get')) {
    const reason = prefix === null ? 'this user may not install them' : 'this is not a Debian that could install them';
    throw new SetupRefusal(`Pennyweight needs Debian packages for ${purposes}, and ${reason}: ${advice}.`);
  }
  const begun = performance.now();
  announce('system', `installing ${packages.join(', ')} for ${purposes}`);
  const { code, output } = await aptGet(prefix, packages);
  if (code !== 0 || (await missing(names)).length > 0) {
    throw new SetupRefusal(
      `apt-get could not install ${packages.join(', ')}; its last words are below: ${advice}.\n${lastLines(output)}`,
    );
  }
  announce('system', `installed in ${seconds(begun)}`);
}

/** Installs what is missing; without a `required` part nothing works, without a `wanted` one something is slower. */
export async function ensureDebianPackages({ required = [], wanted = [], command }) {
  await exclusively('system', async () => {
    const lacking = await missing(required);
    if (lacking.length > 0) await install(lacking, command);
    for (const name of await missing(wanted)) {
      await install([name], command).catch((error) => {
        if (!(error instanceof SetupRefusal)) throw error;
        warn('system', `going on without ${parts[name].packages.join(', ')} (${parts[name].purpose}).`);
      });
    }
  });
}
