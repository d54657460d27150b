import { SetupRefusal } from './refusal.js';

const needed = [20, 19];

/** Vite 8 and require() of ES modules need Node.js 20.19 (its own release notes). */
export function checkNodeVersion(version = process.versions.node) {
  const [major, minor] = version.split('.').map(Number);
  if (major > needed[0] || (major === needed[0] && minor >= needed[1])) return;
  throw new SetupRefusal(
    `Pennyweight needs Node.js ${needed.join('.')} or newer and this is ${version}: install a newer Node.js 20 and start again.`,
  );
}
