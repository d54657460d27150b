/**
 * NPY files as an archive: each file is one array, '/' + the file's stem. A Fortran-ordered array is stored as the C
 * order of its reversed shape.
 */
import { basename, extname } from 'node:path';
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents } from '#contract/reading.ts';
import type { Archive } from '../archive.ts';
import { arrayInfo } from '../contents-index.ts';
import type { FileBytes } from '../file-bytes.ts';
import { flatArray } from '../flat-array.ts';
import { sizeOf } from '../stored-array.ts';
import { readNpyHeader } from './npy-header.ts';

function pathOf(name: string): string {
  return `/${basename(name, extname(name).toLowerCase() === '.npy' ? extname(name) : '')}`;
}

export function openNpyArchive(files: FileBytes[]): Archive {
  const headers = files.map(readNpyHeader);
  const stems = files.map(({ name }) => pathOf(name));
  const paths = stems.map((stem, i) => (stems.indexOf(stem) === i ? stem : `/${files[i].name}`));
  if (new Set(paths).size < paths.length) {
    throw new PennyweightError('invalid-input', 'two files of the archive have the same name; give each its own.', { files: files.map(({ name }) => name) });
  }
  const contents: ArchiveContents = {
    format: 'npy',
    files: files.map(({ name, size }) => ({ name, bytes: size })),
    arrays: headers.map(({ dtype, byteOrder, fortran, shape }, i) => ({
      path: paths[i],
      shape,
      dtype,
      byteOrder,
      order: fortran && shape.length > 1 ? 'F' : 'C',
      file: i,
      chunks: null,
      filters: [],
      attributes: {},
      dimensionScales: null,
      fillValue: null,
      allocated: sizeOf(shape),
    })),
    groups: [{ path: '/', attributes: {} }],
    outsideLinks: [],
    writerOpen: false,
    damaged: headers.flatMap(({ shape, itemBytes, offset }, i) => {
      const rest = files[i].size - offset - sizeOf(shape) * itemBytes;
      return rest > 0 ? [{ path: files[i].name, reason: `the file goes on for ${rest} bytes after the array that its header describes` }] : [];
    }),
  };
  return {
    contents,
    array(path) {
      const { file: at, dtype, shape, order } = arrayInfo(contents, path);
      const { itemBytes, byteOrder, offset } = headers[at];
      return flatArray({
        path,
        file: files[at],
        offset,
        shape: order === 'F' ? shape.toReversed() : shape,
        dtype,
        itemBytes,
        bigEndian: byteOrder === 'big',
      });
    },
    unlimited: () => null,
    close: () => files.forEach((file) => file.close()),
  };
}
