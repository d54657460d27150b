/**
 * Version 2 B-tree of raw data chunks, record types 10 and 11 (HDF5 File Format Specification 3.0, III.A.2). The sizes
 * of the counts in a node's pointers follow from the most records that a node of each depth can hold.
 */
import { cursorAt, notUnderstood, type StructureFile } from './structure-cursor.ts';

const mostNodes = 1_000_000;
/** Signature, version, type, checksum. */
const nodeOverhead = 4 + 1 + 1 + 4;

/** Bytes that hold the numbers up to `limit` (H5VM_limit_enc_size of the HDF5 library). */
function bytesFor(limit: number): number {
  return Math.floor(Math.floor(Math.log2(Math.max(1, limit))) / 8) + 1;
}

export function visitBTree2(file: StructureFile, header: number, axes: number, visit: (at: number[]) => void): void {
  const head = cursorAt(file, header, 4 + 2 + 4 + 2 + 2 + 2 + file.offsetBytes + 2 + file.lengthBytes);
  head.expect('BTHD');
  head.skip(1);
  const type = head.number(1);
  const nodeBytes = head.number(4);
  const recordBytes = head.number(2);
  const depth = head.number(2);
  head.skip(2);
  const root = head.address();
  const rootRecords = head.number(2);
  const scaledAt = recordBytes - 8 * axes;
  if ((type !== 10 && type !== 11) || scaledAt < file.offsetBytes || nodeBytes < 32 || nodeBytes > 2 ** 24 || depth > 16) {
    throw notUnderstood('an index of chunks');
  }
  if (root === null) return;

  const leafMost = Math.floor((nodeBytes - nodeOverhead) / recordBytes);
  const countBytes = bytesFor(leafMost);
  /** bytes of "all records below" in a pointer to a node of each depth; none for leaves */
  const totalBytes = [0];
  let below = leafMost;
  for (let level = 1; level <= depth; level++) {
    const pointer = file.offsetBytes + countBytes + totalBytes[level - 1];
    const most = Math.floor((nodeBytes - nodeOverhead - pointer) / (recordBytes + pointer));
    below = (most + 1) * below + most;
    totalBytes.push(bytesFor(below));
  }

  const at = new Array<number>(axes).fill(0);
  const seen = new Set<number>();
  const stack = [{ position: root, level: depth, records: rootRecords }];
  for (let node = stack.pop(); node; node = stack.pop()) {
    if (seen.has(node.position) || seen.size > mostNodes) throw notUnderstood('an index of chunks that goes round');
    seen.add(node.position);
    const cursor = cursorAt(file, node.position, nodeBytes);
    cursor.expect(node.level === 0 ? 'BTLF' : 'BTIN');
    cursor.skip(2);
    for (let i = 0; i < node.records; i++) {
      const end = cursor.at + recordBytes;
      const address = cursor.address();
      cursor.skip(scaledAt - file.offsetBytes);
      for (let axis = 0; axis < axes; axis++) at[axis] = cursor.number(8);
      if (cursor.at !== end || !at.every(Number.isSafeInteger)) throw notUnderstood('the position of a chunk');
      if (address !== null) visit(at);
    }
    if (node.level === 0) continue;
    for (let i = 0; i <= node.records; i++) {
      const position = cursor.address();
      const records = cursor.number(countBytes);
      cursor.skip(totalBytes[node.level - 1]);
      if (position !== null) stack.push({ position, level: node.level - 1, records });
    }
  }
}
