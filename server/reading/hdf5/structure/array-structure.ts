/**
 * What the file's own structures say of one array, beyond what the HDF5 library tells: where contiguous data lie, how
 * much was written, the declared fill value, the exact element type, files outside. Anything not understood is null.
 */
import { sizeOf } from '../../stored-array.ts';
import { countAllocated } from './allocated-chunks.ts';
import { readDataspace, type Dataspace } from './dataspace-message.ts';
import { readStoredType, type StoredType } from './datatype-message.ts';
import { readExternalFiles } from './external-files-message.ts';
import { readFillValue } from './fill-value-message.ts';
import { readLayout, type Layout } from './layout-message.ts';
import { messageTypes, readObjectHeader } from './object-header.ts';
import type { StructureFile } from './structure-cursor.ts';

export interface ArrayStructure {
  space: Dataspace | null;
  type: StoredType | null;
  layout: Layout | null;
  fillValue: number | null;
  /** elements that the file holds; null when unknown */
  allocated: number | null;
  /** files outside that hold the data */
  externalFiles: string[];
}

function orNull<T>(read: () => T): T | null {
  try {
    return read();
  } catch {
    return null;
  }
}

function allocatedElements(file: StructureFile, layout: Layout, space: Dataspace): number | null {
  switch (layout.kind) {
    case 'compact':
      return sizeOf(space.shape);
    case 'contiguous':
      return layout.address === null ? 0 : sizeOf(space.shape);
    case 'chunked':
      return countAllocated(file, layout, space);
    case 'virtual':
      return null;
  }
}

/** `position`: of the array's object header. Never throws: a structure that is not understood is left out. */
export function readArrayStructure(file: StructureFile, position: number): ArrayStructure | null {
  const messages = orNull(() => readObjectHeader(file, position));
  if (!messages) return null;
  const body = (type: number) => messages.find((message) => message.type === type)?.body;
  const part = <T>(type: number, read: (file: StructureFile, bytes: Uint8Array) => T): T | null => {
    const bytes = body(type);
    return bytes ? orNull(() => read(file, bytes)) : null;
  };
  const space = part(messageTypes.dataspace, readDataspace);
  const type = part(messageTypes.datatype, readStoredType);
  const layout = part(messageTypes.layout, readLayout);
  const outside = body(messageTypes.externalFiles);
  return {
    space,
    type,
    layout,
    fillValue: type && orNull(() => readFillValue(file, messages, type)),
    allocated: layout && space && !outside ? orNull(() => allocatedElements(file, layout, space)) : null,
    externalFiles: outside ? (part(messageTypes.externalFiles, readExternalFiles) ?? ['a file whose name could not be read']) : [],
  };
}
