/** One HDF5 file as an archive. */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, ArrayInfo } from '#contract/reading.ts';
import type { Archive } from '../archive.ts';
import { arrayInfo } from '../contents-index.ts';
import { elementBytes } from '../element.ts';
import type { FileBytes } from '../file-bytes.ts';
import { flatArray } from '../flat-array.ts';
import type { Limits } from '../limits.ts';
import { refuseLargeChunks } from '../slab-plan.ts';
import { sizeOf, type StoredArray } from '../stored-array.ts';
import { readHdf5Contents } from './contents.ts';
import { needsPlugin } from './filters.ts';
import { libraryArray } from './library-array.ts';
import { openHdf5 } from './library.ts';
import type { ArrayStructure } from './structure/array-structure.ts';
import { isOpenForWriting, readSuperblock, type Superblock } from './structure/superblock.ts';

export async function openHdf5Archive(path: string, file: FileBytes, offset: number, limits: Limits): Promise<Archive> {
  const superblock = superblockOf(file, offset);
  const library = await openHdf5(path, file, superblock);
  const { arrays, groups, outsideLinks, damaged, structures, unlimited } = readHdf5Contents(library, superblock, 0, limits);
  const contents: ArchiveContents = {
    // netCDF-4 marks its files with the attribute _NCProperties (netCDF-C documentation, file format specifications).
    format: groups[0]?.attributes._NCProperties === undefined ? 'hdf5' : 'netcdf4',
    files: [{ name: file.name, bytes: file.size }],
    arrays,
    groups,
    outsideLinks,
    writerOpen: isOpenForWriting(superblock),
    damaged,
  };
  const opened = new Map<string, StoredArray>();

  function open(info: ArrayInfo): StoredArray {
    const structure = structures.get(info.path);
    refuseLargeChunks(info.path, info.chunks, elementBytes[info.dtype], limits.chunkBytes);
    if (needsPlugin(info.filters)) library.loadPlugins();
    const read = libraryArray(library, info, elementBytes[info.dtype]);
    const direct = structure ? directArray(file, info, structure) : null;
    return direct && agree(direct, read) ? direct : read;
  }

  return {
    contents,
    array(arrayPath) {
      const known = opened.get(arrayPath) ?? open(arrayInfo(contents, arrayPath));
      opened.set(arrayPath, known);
      return known;
    },
    unlimited: (arrayPath) => unlimited.get(arrayPath) ?? null,
    close() {
      library.module.close_file(library.fileId);
      file.close();
    },
  };
}

function superblockOf(file: FileBytes, offset: number): Superblock {
  try {
    return readSuperblock(file, offset);
  } catch (cause) {
    throw new PennyweightError(
      'file-unreadable',
      `${file.name} has the signature of HDF5 and then no sound superblock: it is damaged or cut off after ${file.size} bytes; upload it again.`,
      { file: file.name, actual: file.size },
      { cause },
    );
  }
}

/** Contiguous data straight from the file: no copy through the library's memory. */
function directArray(file: FileBytes, info: ArrayInfo, { layout, type, externalFiles }: ArrayStructure): StoredArray | null {
  if (layout?.kind !== 'contiguous' || layout.address === null || !type || externalFiles.length > 0) return null;
  const itemBytes = elementBytes[info.dtype];
  const bytes = sizeOf(info.shape) * itemBytes;
  if (itemBytes === 0 || type.bytes !== itemBytes || bytes === 0) return null;
  if (layout.address + bytes > file.size || (layout.bytes !== null && layout.bytes < bytes)) return null;
  return flatArray({ path: info.path, file, offset: layout.address, shape: info.shape, dtype: info.dtype, itemBytes, bigEndian: type.byteOrder === 'big' });
}

/** The way past the library is taken only where both give the same first and last element. */
function agree(direct: StoredArray, read: StoredArray): boolean {
  const one = direct.shape.map(() => 1);
  for (const at of [direct.shape.map(() => 0), direct.shape.map((size) => size - 1)]) {
    const ours = Buffer.from(direct.readBox(at, one));
    if (!ours.equals(read.readBox(at, one))) return false;
  }
  return true;
}
