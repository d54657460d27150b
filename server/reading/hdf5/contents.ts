/**
 * What an HDF5 file holds: a walk over its groups without recursion. An object is listed once, by the first hard link
 * that reaches its address, so circles end; soft links lead to objects that are listed anyway; external links are listed
 * and never followed.
 */
import { PennyweightError } from '#contract/error.ts';
import type { ArchiveContents, ArrayInfo, ElementType } from '#contract/reading.ts';
import type { Metadata } from 'h5wasm/node';
import { elementBytes } from '../element.ts';
import type { Limits } from '../limits.ts';
import { sizeOf } from '../stored-array.ts';
import { attributesOf } from './attributes.ts';
import { filtersOf } from './filters.ts';
import type { Hdf5Library } from './library.ts';
import { readArrayStructure, type ArrayStructure } from './structure/array-structure.ts';
import type { StructureFile } from './structure/structure-cursor.ts';

export interface Hdf5Contents {
  arrays: ArrayInfo[];
  groups: ArchiveContents['groups'];
  outsideLinks: ArchiveContents['outsideLinks'];
  damaged: ArchiveContents['damaged'];
  structures: Map<string, ArrayStructure>;
  /** which axes of each array may grow without limit */
  unlimited: Map<string, boolean[]>;
}

/** H5G_obj_t of the HDF5 library. */
const kinds = { group: 0, array: 1, type: 2, link: 3, userLink: 4 };

export function readHdf5Contents(library: Hdf5Library, file: StructureFile, position: number, limits: Limits): Hdf5Contents {
  const contents: Hdf5Contents = { arrays: [], groups: [], outsideLinks: [], damaged: [], structures: new Map(), unlimited: new Map() };
  const seen = new Set<number>();
  let objects = 0;

  /** Position of the object's header: an object reference of the library is its address. */
  function positionOf(path: string): number | null {
    const reference = library.attempt((module, fileId) => module.create_object_reference(fileId, path));
    if (!reference || reference.length !== 8) return null;
    const address = Number(new DataView(Uint8Array.from(reference).buffer).getBigUint64(0, true));
    return address > 0 && Number.isSafeInteger(address) ? address + file.base : null;
  }

  function addArray(path: string, at: number): void {
    const metadata = library.attempt((module, fileId) => module.get_dataset_metadata(fileId, path));
    if (!metadata) {
      contents.damaged.push({ path, reason: 'its description could not be read' });
      return;
    }
    const structure = trusted(readArrayStructure(file, at), metadata);
    const shape = metadata.shape ?? [0];
    if (!Number.isSafeInteger(sizeOf(shape))) {
      contents.damaged.push({ path, reason: `its shape (${shape.join(', ')}) is beyond any file` });
      return;
    }
    if (structure) contents.structures.set(path, structure);
    // H5S_UNLIMITED is 2^64 - 1.
    contents.unlimited.set(path, (metadata.maxshape ?? []).map((size) => size > Number.MAX_SAFE_INTEGER));
    const type = structure?.type ?? { dtype: typeOf(metadata), byteOrder: metadata.littleEndian ? ('little' as const) : ('big' as const) };
    contents.arrays.push({
      path,
      shape,
      dtype: type.dtype,
      byteOrder: elementBytes[type.dtype] > 1 ? type.byteOrder : 'none',
      order: 'C',
      file: position,
      chunks: metadata.chunks && metadata.chunks.every((size) => size > 0) ? metadata.chunks : null,
      filters: metadata.chunks ? filtersOf(library, path) : [],
      attributes: attributesOf(library, path, limits),
      dimensionScales: scalesOf(library, path, shape.length),
      fillValue: structure?.fillValue ?? null,
      allocated: structure?.allocated ?? null,
    });
    for (const name of structure?.externalFiles ?? []) contents.outsideLinks.push({ path, kind: 'external-storage', target: name });
    const targets = (metadata.virtual_sources ?? []).filter(({ file_name: name }) => name !== '.').map((source) => `${source.file_name}:${source.dset_name}`);
    for (const target of new Set(targets)) contents.outsideLinks.push({ path, kind: 'virtual-source', target });
    const { layout } = structure ?? {};
    const bytes = sizeOf(shape) * metadata.size;
    if (layout?.kind === 'contiguous' && layout.address !== null && layout.address + bytes > file.bytes.size) {
      contents.damaged.push({ path, reason: `its shape (${shape.join(', ')}) needs ${bytes} bytes from byte ${layout.address} on, and the file ends at ${file.bytes.size}` });
    }
  }

  const stack = [{ path: '/', depth: 0 }];
  const root = positionOf('/');
  if (root !== null) seen.add(root);
  for (let group = stack.pop(); group; group = stack.pop()) {
    const { path, depth } = group;
    contents.groups.push({ path, attributes: attributesOf(library, path, limits) });
    const names = library.attempt((module, fileId) => module.get_names(fileId, path, false));
    if (!names) {
      contents.damaged.push({ path, reason: 'the list of its members could not be read' });
      continue;
    }
    objects += names.length;
    if (objects > limits.objects) {
      throw new PennyweightError('limit-exceeded', `${library.fileName} holds more than ${limits.objects} objects; pack the steps of a run into larger arrays.`, {
        file: library.fileName,
        limit: limits.objects,
      });
    }
    const inside: typeof stack = [];
    for (const name of names) {
      const child = path === '/' ? `/${name}` : `${path}/${name}`;
      if (library.attempt((module, fileId) => module.get_symbolic_link(fileId, child)) !== null) continue;
      const kind = library.attempt((module, fileId) => module.get_type(fileId, child));
      if (kind === kinds.userLink) {
        const link = library.attempt((module, fileId) => module.get_external_link(fileId, child));
        contents.outsideLinks.push({ path: child, kind: 'external-link', target: `${link?.filename ?? '?'}:${link?.obj_path ?? '?'}` });
        continue;
      }
      if (kind !== kinds.group && kind !== kinds.array) {
        if (kind !== kinds.type && kind !== kinds.link) contents.damaged.push({ path: child, reason: 'the object could not be opened' });
        continue;
      }
      const at = positionOf(child);
      if (at === null) {
        contents.damaged.push({ path: child, reason: 'the object could not be found in the file' });
        continue;
      }
      if (seen.has(at)) continue;
      seen.add(at);
      if (kind === kinds.array) addArray(child, at);
      else if (depth >= limits.depth) contents.damaged.push({ path: child, reason: `groups are nested deeper than ${limits.depth}, and what is below was not read` });
      else inside.push({ path: child, depth: depth + 1 });
    }
    // Members in their order: the stack is emptied from its end.
    for (let i = inside.length - 1; i >= 0; i--) stack.push(inside[i]);
  }
  return contents;
}

/** The structure only where it agrees with the library on shape, chunks and element size. */
function trusted(structure: ArrayStructure | null, metadata: Metadata): ArrayStructure | null {
  if (!structure) return null;
  const shape = metadata.shape ?? [0];
  const { layout } = structure;
  const sameShape = !structure.space || structure.space.shape.join() === shape.join();
  const sameChunks = layout?.kind !== 'chunked' || (metadata.chunks ?? []).join() === layout.chunk.join();
  const sameSize = !structure.type || structure.type.dtype === 'string' || structure.type.bytes === metadata.size;
  return sameShape && sameChunks && sameSize ? structure : null;
}

/** Element type by the library's words alone, where the file's own datatype message was not understood. */
function typeOf(metadata: Metadata): ElementType {
  const { type, size, signed } = metadata;
  const bits = 8 * size;
  if (type === 0 && [8, 16, 32, 64].includes(bits)) return `${signed ? 'int' : 'uint'}${bits}` as ElementType;
  if (type === 1 && (bits === 32 || bits === 64)) return `float${bits}` as ElementType;
  return type === 3 ? 'string' : 'other';
}

function scalesOf(library: Hdf5Library, path: string, axes: number): string[] | null {
  const attached = library.attempt((module, fileId) => module.get_attribute_names(fileId, path).includes('DIMENSION_LIST'));
  if (!attached) return null;
  return Array.from({ length: axes }, (_, axis) => library.attempt((module, fileId) => module.get_attached_scales(fileId, path, axis))?.[0] ?? '');
}
