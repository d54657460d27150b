/**
 * An array read through the HDF5 library: chunked, filtered, compact data. One call a box, into one piece of the
 * library's memory that only grows; the library turns big-endian numbers round. A failed call leaves old memory behind,
 * so its status decides, always.
 */
import { PennyweightError } from '#contract/error.ts';
import type { ArrayInfo } from '#contract/reading.ts';
import { sizeOf, type StoredArray } from '../stored-array.ts';
import type { Hdf5Library } from './library.ts';

/** WebAssembly memory ends at 2 GiB; a box is far below. */
const largestBox = 2 ** 30;

export function libraryArray(library: Hdf5Library, info: ArrayInfo, itemBytes: number): StoredArray {
  const { path } = info;
  let pointer = 0;
  let room = 0;

  function refuse(start: number[], cause?: unknown): PennyweightError {
    return new PennyweightError(
      'file-unreadable',
      `${path} in ${library.fileName} could not be read at index (${start.join(', ')}): the data there are damaged; compare the file with the original and upload it again.`,
      { file: library.fileName, path, index: start },
      { cause },
    );
  }

  function readBox(start: number[], count: number[]): Uint8Array {
    const bytes = sizeOf(count) * itemBytes;
    const { module } = library;
    if (bytes > largestBox) {
      throw new PennyweightError('limit-exceeded', `${path} in ${library.fileName} would be read in pieces of ${bytes} bytes; store it in smaller chunks.`, { path, bytes });
    }
    if (bytes > room) {
      if (pointer) module._free(pointer);
      pointer = module._malloc(bytes);
      room = pointer ? bytes : 0;
      if (!pointer) throw new PennyweightError('limit-exceeded', `there is no memory to read ${path} in ${library.fileName}; store it in smaller chunks.`, { path, bytes });
    }
    if (bytes === 0) return new Uint8Array(0);
    const whole = count.length === 0;
    const status = library.attempt((h5, fileId) =>
      h5.get_dataset_data(
        fileId,
        path,
        whole ? null : count.map(BigInt),
        whole ? null : start.map(BigInt),
        whole ? null : count.map(() => 1n),
        BigInt(pointer),
      ),
    );
    if (status === null || status < 0) throw refuse(start);
    // A view made anew: the memory may have grown and moved.
    return module.HEAPU8.subarray(pointer, pointer + bytes);
  }

  return { path, dtype: info.dtype, itemBytes, shape: info.shape, chunk: info.chunks, readBox };
}
