/** SHA-256 of files on this machine, read in blocks. */
import { createHash } from 'node:crypto';
import { closeSync, openSync, readSync } from 'node:fs';

const blockBytes = 4 * 2 ** 20;

export function fileDigest(path: string, onBytes: (count: number) => void = () => undefined): string {
  const hash = createHash('sha256');
  const block = Buffer.allocUnsafe(blockBytes);
  const descriptor = openSync(path, 'r');
  try {
    for (;;) {
      const count = readSync(descriptor, block, 0, blockBytes, null);
      if (count === 0) return hash.digest('hex');
      hash.update(block.subarray(0, count));
      onBytes(count);
    }
  } finally {
    closeSync(descriptor);
  }
}

/** Of one file its own; of a series that of the lines which sha256sum prints for the files, in their order. */
export function archiveDigest(files: { name: string; sha256: string }[]): string {
  if (files.length === 1) return files[0].sha256;
  return createHash('sha256')
    .update(files.map(({ name, sha256 }) => `${sha256}  ${name}\n`).join(''))
    .digest('hex');
}
