/** Messages of an object header, versions 1 and 2 (HDF5 File Format Specification 3.0, IV.A.1). */
import { cursorAt, cursorUpTo, notUnderstood, StructureCursor, type StructureFile } from './structure-cursor.ts';

export const messageTypes = {
  dataspace: 0x0001,
  datatype: 0x0003,
  oldFillValue: 0x0004,
  fillValue: 0x0005,
  externalFiles: 0x0007,
  layout: 0x0008,
  continuation: 0x0010,
} as const;

export interface HeaderMessage {
  type: number;
  body: Uint8Array;
}

const mostMessages = 4096;
const mostBlocks = 256;
const longestBlock = 16 * 2 ** 20;

/** Bit 1 of a message's flags: the body only says where the message really is. */
const shared = 0x02;

/** The first block of messages, and how messages are written there. */
function openHeader(file: StructureFile, position: number): { modern: boolean; orderBytes: number; first: StructureCursor } {
  const probe = cursorUpTo(file, position, 64);
  const modern = String.fromCharCode(...probe.bytes.subarray(0, 4)) === 'OHDR';
  if (modern) probe.skip(4);
  if (probe.number(1) !== (modern ? 2 : 1)) throw notUnderstood('the version of an object header');
  let orderBytes = 0;
  let size: number;
  if (modern) {
    const flags = probe.number(1);
    if (flags & 0x20) probe.skip(16);
    if (flags & 0x10) probe.skip(4);
    orderBytes = flags & 0x04 ? 2 : 0;
    size = probe.number(1 << (flags & 3));
  } else {
    probe.skip(1 + 2 + 4);
    size = probe.number(4);
    probe.skip(4);
  }
  if (size > longestBlock) throw notUnderstood('the size of an object header');
  return { modern, orderBytes, first: cursorAt(file, position + probe.at, size) };
}

/** Iterative over continuation blocks; a block that was seen is not read again, so a circle ends. */
export function readObjectHeader(file: StructureFile, position: number, followShared = true): HeaderMessage[] {
  const { modern, orderBytes, first } = openHeader(file, position);
  const head = modern ? 4 + orderBytes : 8;
  const messages: HeaderMessage[] = [];
  const seen = new Set<number>();
  const blocks: { position: number; length: number }[] = [];

  function readMessages(cursor: StructureCursor): void {
    while (cursor.left >= head && messages.length < mostMessages) {
      const type = cursor.number(modern ? 1 : 2);
      const size = cursor.number(2);
      const flags = cursor.number(1);
      cursor.skip(modern ? orderBytes : 3);
      const body = cursor.take(size);
      if (type === messageTypes.continuation) {
        const next = new StructureCursor(file, body);
        const at = next.address();
        const length = next.length();
        if (at === null || length > longestBlock) throw notUnderstood('the continuation of an object header');
        blocks.push({ position: at, length });
      } else if (flags & shared) {
        const message = followShared ? readShared(file, type, body) : null;
        if (message) messages.push(message);
      } else {
        messages.push({ type, body });
      }
    }
  }

  readMessages(first);
  for (let block = blocks.shift(); block; block = blocks.shift()) {
    if (seen.has(block.position)) continue;
    seen.add(block.position);
    if (seen.size > mostBlocks) throw notUnderstood('an object header of too many parts');
    const cursor = cursorAt(file, block.position, block.length);
    if (modern) cursor.expect('OCHK');
    readMessages(modern ? new StructureCursor(file, cursor.bytes.subarray(4, Math.max(4, cursor.bytes.length - 4))) : cursor);
  }
  return messages;
}

/**
 * A message in another object's header (a committed datatype). References found there are not followed further, so
 * nothing can go round; messages in the shared message heap stay unknown.
 */
function readShared(file: StructureFile, type: number, body: Uint8Array): HeaderMessage | null {
  const cursor = new StructureCursor(file, body);
  const version = cursor.number(1);
  const kind = cursor.number(1);
  if (version === 1) cursor.skip(6);
  if (version < 1 || version > 3 || (version === 3 && kind !== 2)) return null;
  const position = cursor.address();
  if (position === null) return null;
  return readObjectHeader(file, position, false).find((message) => message.type === type) ?? null;
}
