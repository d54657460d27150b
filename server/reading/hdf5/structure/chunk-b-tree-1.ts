/** Version 1 B-tree of raw data chunks (HDF5 File Format Specification 3.0, III.A.1). */
import { cursorUpTo, notUnderstood, type StructureFile } from './structure-cursor.ts';

/** A file cannot hold more nodes than this in any archive that is handed in: 64 entries a node, 6e7 chunks. */
const mostNodes = 1_000_000;

export function visitBTree1(file: StructureFile, root: number, chunk: number[], visit: (at: number[]) => void): void {
  const axes = chunk.length;
  const keyBytes = 8 + 8 * (axes + 1);
  const headBytes = 8 + 2 * file.offsetBytes;
  const seen = new Set<number>();
  const stack = [{ position: root, level: -1 }];
  const at = new Array<number>(axes).fill(0);
  for (let node = stack.pop(); node; node = stack.pop()) {
    if (seen.has(node.position) || seen.size > mostNodes) throw notUnderstood('an index of chunks that goes round');
    seen.add(node.position);
    const head = cursorUpTo(file, node.position, headBytes);
    head.expect('TREE');
    if (head.number(1) !== 1) throw notUnderstood('the kind of an index of chunks');
    const level = head.number(1);
    if (node.level >= 0 && level !== node.level) throw notUnderstood('the level of an index of chunks');
    const entries = head.number(2);
    const cursor = cursorUpTo(file, node.position + headBytes, entries * (keyBytes + file.offsetBytes) + keyBytes);
    for (let entry = 0; entry < entries; entry++) {
      cursor.skip(8);
      for (let i = 0; i < axes; i++) at[i] = cursor.number(8) / chunk[i];
      cursor.skip(8);
      const child = cursor.address();
      if (child === null) continue;
      if (level > 0) stack.push({ position: child, level: level - 1 });
      else if (at.every(Number.isSafeInteger)) visit(at);
      else throw notUnderstood('the position of a chunk');
    }
  }
}
