/**
 * The snapshots of an archive as a matrix that can be gone through by rows: column after column in memory while it is
 * small, else in a file of the system's temporary folder, which is removed with it.
 */
import { closeSync, mkdtempSync, openSync, readSync, rmSync, statfsSync, writeSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { PennyweightError } from '#contract/error.ts';
import type { RowTile, RowTileSource } from '../engine/spectrum/spectrum.ts';

const heldBytes = 192 * 2 ** 20;
const tileBytes = 32 * 2 ** 20;

export interface SnapshotMatrix extends RowTileSource {
  /** Column `j`, of length n. */
  put(j: number, column: Float64Array): void;
  close(): void;
}

interface Columns {
  put(j: number, column: Float64Array): void;
  read(j: number, from: number, into: Float64Array): void;
  close(): void;
}

function inMemory(nodes: number, snapshots: number): Columns {
  const values = new Float64Array(nodes * snapshots);
  return {
    put: (j, column) => values.set(column, j * nodes),
    read: (j, from, into) => into.set(values.subarray(j * nodes + from, j * nodes + from + into.length)),
    close: () => undefined,
  };
}

function inFile(nodes: number, snapshots: number): Columns {
  const needed = nodes * snapshots * 8;
  const { bavail, bsize } = statfsSync(tmpdir());
  if (needed > bavail * bsize) {
    throw new PennyweightError(
      'limit-exceeded',
      `The matrix needs ${needed} bytes in ${tmpdir()} and ${bavail * bsize} are free: set TMPDIR to a larger folder.`,
      { needed, free: bavail * bsize },
    );
  }
  const folder = mkdtempSync(join(tmpdir(), 'pennyweight-'));
  const descriptor = openSync(join(folder, 'columns'), 'w+');
  const bytesOf = (values: Float64Array) => new Uint8Array(values.buffer, values.byteOffset, values.byteLength);
  return {
    put: (j, column) => void writeSync(descriptor, bytesOf(column), 0, column.byteLength, j * nodes * 8),
    read: (j, from, into) => void readSync(descriptor, bytesOf(into), 0, into.byteLength, (j * nodes + from) * 8),
    close: () => {
      closeSync(descriptor);
      rmSync(folder, { recursive: true, force: true });
    },
  };
}

export function snapshotMatrix(nodes: number, snapshots: number): SnapshotMatrix {
  const columns = nodes * snapshots * 8 <= heldBytes ? inMemory(nodes, snapshots) : inFile(nodes, snapshots);
  const tileRows = Math.max(1, Math.floor(tileBytes / 8 / Math.max(1, snapshots)));
  async function* tiles(): AsyncGenerator<RowTile> {
    for (let from = 0; from < nodes; from += tileRows) {
      const rows = Math.min(tileRows, nodes - from);
      const values = new Float64Array(rows * snapshots);
      for (let j = 0; j < snapshots; j++) columns.read(j, from, values.subarray(j * rows, (j + 1) * rows));
      yield await Promise.resolve({ from, rows, values });
    }
  }
  return { nodes, snapshots, tiles, put: columns.put, close: columns.close };
}
