/** Where things lie in this checkout. These files run before any package is installed: node: imports only. */
import { createHash } from 'node:crypto';
import { accessSync, constants, mkdirSync, realpathSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { SetupRefusal } from './refusal.js';

export const checkout = realpathSync(fileURLToPath(new URL('../..', import.meta.url)));
export const storage = join(checkout, 'storage');
export const dist = join(checkout, 'dist');
export const logs = join(storage, 'logs');

/** Everything made at run time lies in storage/, but for node_modules and dist. */
export function prepareStorage() {
  try {
    mkdirSync(logs, { recursive: true });
    for (const folder of [checkout, storage, logs]) accessSync(folder, constants.W_OK);
  } catch (cause) {
    throw new SetupRefusal(
      `This user may not write into ${cause.path ?? checkout}: start Pennyweight as the user who owns the checkout, or clone it anew as this one.`,
      { cause },
    );
  }
}

/** Names this checkout on this machine; by device and inode too, so that two containers with the same path differ. */
export function checkoutId() {
  const { dev, ino } = statSync(checkout);
  return createHash('sha256').update(`${checkout}\n${dev}\n${ino}`).digest('hex').slice(0, 16);
}

/** Names a path on this machine, for folders outside the checkout. */
export function pathId(path) {
  return createHash('sha256').update(path).digest('hex').slice(0, 16);
}
