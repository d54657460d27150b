/** What --out writes: weights, spectrum and modes as files that general tools read. */
import { mkdirSync, readdirSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { modesOf } from '../engine/spectrum/spectrum.ts';
import type { LinearAlgebra } from '../linalg/linear-algebra.ts';
import { writeMatrix, writeVector } from './npy-file.ts';
import { wrongUsage } from './usage.ts';
import type { WeighedArchive } from './weighed-archive.ts';

/** Before any work: a folder that holds something already is not written into. */
export function prepareFolder(folder: string): void {
  const stat = statSync(folder, { throwIfNoEntry: false });
  if (stat && !stat.isDirectory()) throw wrongUsage(`--out: ${folder} is not a folder.`);
  if (stat && readdirSync(folder).length > 0)
    throw wrongUsage(`--out: the folder ${folder} is not empty; name a new one.`);
  mkdirSync(folder, { recursive: true });
}

/** Returns the names of the files written. */
export async function writeWeights(
  folder: string,
  weighed: WeighedArchive,
  modes: number,
  algebra: LinearAlgebra,
): Promise<string[]> {
  const written: string[] = [];
  const path = (name: string) => {
    written.push(name);
    return join(folder, name);
  };
  const { report, stamps, timeWeights, spaceWeights, decomposition, matrix } = weighed;
  writeFileSync(path('weights.json'), `${JSON.stringify(report, null, 2)}\n`);
  if (stamps) writeVector(path('time.npy'), stamps);
  if (timeWeights.length > 0) writeVector(path('time_weights.npy'), timeWeights);
  writeVector(path('space_weights.npy'), spaceWeights);
  if (!decomposition) return written;
  const { singularValues, result } = decomposition;
  writeFileSync(
    path('spectrum.csv'),
    `k,singular_value,above_floor\n${Array.from(singularValues, (value, k) => `${k + 1},${value},${k < result.resolved}\n`).join('')}`,
  );
  const count = Math.min(modes, result.resolved);
  await writeMatrix(
    path('modes.npy'),
    matrix.nodes,
    count,
    modesOf(matrix, timeWeights, decomposition, count, algebra),
  );
  return written;
}
