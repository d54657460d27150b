/** Bytes of one archive file by position. Opened without waiting, so that a named pipe cannot hold the reader up. */
import { closeSync, constants, fstatSync, openSync, readSync } from 'node:fs';
import { PennyweightError } from '#contract/error.ts';

export interface FileBytes {
  name: string;
  size: number;
  /** Fills `into` from byte `position`; a file that ends before is refused with the expected and the actual length. */
  fill(into: Uint8Array, position: number): void;
  read(position: number, length: number): Uint8Array;
  close(): void;
}

/** Largest single read of metadata: nothing of a header or an index is longer. */
const metadataBytes = 64 * 2 ** 20;

export function openFile(path: string, name: string): FileBytes {
  let fd: number;
  try {
    fd = openSync(path, constants.O_RDONLY | constants.O_NONBLOCK);
  } catch (cause) {
    throw new PennyweightError('file-unreadable', `${name} could not be opened; upload it again.`, { file: name }, { cause });
  }
  const status = fstatSync(fd);
  if (!status.isFile()) {
    closeSync(fd);
    throw new PennyweightError('file-unreadable', `${name} is not a regular file; hand in the file that the solver wrote.`, { file: name });
  }
  const size = status.size;

  function fill(into: Uint8Array, position: number): void {
    let done = 0;
    while (done < into.length) {
      const got = readSync(fd, into, done, into.length - done, position + done);
      if (got === 0) {
        const expected = position + into.length;
        throw new PennyweightError(
          'file-unreadable',
          `${name} is cut off: ${expected} bytes are expected and ${position + done} are there; upload it again.`,
          { file: name, expected, actual: position + done },
        );
      }
      done += got;
    }
  }

  return {
    name,
    size,
    fill,
    read(position, length) {
      if (!Number.isSafeInteger(position) || position < 0 || length < 0 || length > metadataBytes) {
        throw new PennyweightError('file-unreadable', `${name} points to ${length} bytes at ${position}, which cannot be; upload it again.`, {
          file: name,
          position,
          length,
        });
      }
      const bytes = new Uint8Array(length);
      fill(bytes, position);
      return bytes;
    },
    close: () => closeSync(fd),
  };
}
