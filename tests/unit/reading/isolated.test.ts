/** The reading process started from source: snapshots in blocks, several askers at once, and who stops early. */
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Reading } from '#contract/reading.ts';
import { openIsolated, type IsolatedArchive } from '../../../server/reading/isolated.ts';
import { folderForTests, npy } from './bytes-on-disk.ts';

const folder = folderForTests();
const [m, n] = [40, 300_000];
const value = (j: number, i: number) => Math.fround(j * 1000 + (i % 977));

function matrixFile(fortran: boolean): { name: string; path: string } {
  const values = new Float32Array(m * n);
  for (let j = 0; j < m; j++) for (let i = 0; i < n; i++) values[j * n + i] = value(j, i);
  // [n][m] in Fortran order and [m][n] in C order are the same bytes; [n][m] in C order is time last.
  const stored = fortran ? values : values.map((_, k) => value(k % m, Math.floor(k / m)));
  const header = `{'descr': '<f4', 'fortran_order': ${fortran ? 'True' : 'False'}, 'shape': (${n}, ${m}), }`;
  return folder.write(fortran ? 'columns.npy' : 'rows.npy', npy(header, new Uint8Array(stored.buffer)));
}

const readingOf = (path: string): Reading => ({
  layout: 'snapshot-matrix', time: { kind: 'generated', start: 0, step: 0.5, unit: 's' },
  fields: [{ path, name: 'u', unit: null, axes: ['node', 'time'], why: 'test' }],
  axes: [], spaceWeights: null, timeWeights: null, parameters: [], roles: [],
});

describe.each([
  ['columns.npy', true, 'a snapshot in one piece'],
  ['rows.npy', false, 'all times of a node together'],
])('snapshots of %s', (name, fortran) => {
  let archive: IsolatedArchive;
  const reading = readingOf(`/${name.replace('.npy', '')}`);
  beforeAll(async () => {
    archive = await openIsolated([matrixFile(fortran)]);
  }, 60_000);
  afterAll(() => archive.close());

  it('come in blocks, complete and in the order asked, under the memory limit', async () => {
    const indices = [0, 1, 2, 5, 6, 7, 8, 9, 10, 11, 12, 39, 39, 3];
    let next = 0;
    for await (const block of archive.snapshots(reading, ['u'], indices)) {
      expect([block.from, block.nodes]).toEqual([next, n]);
      expect(block.values).toHaveLength(block.count * n);
      expect(block.values.byteLength).toBeLessThanOrEqual(16 * 2 ** 20);
      for (let p = 0; p < block.count; p++) {
        for (let i = 0; i < n; i += 4999) if (block.values[p * n + i] !== value(indices[next + p], i)) expect.unreachable(`snapshot ${indices[next + p]}, node ${i}`);
      }
      next += block.count;
    }
    expect(next).toBe(indices.length);
    expect(archive.peakBytes()).toBeLessThan(600e6);
  });

  it('may be given up, and asked for twice at the same time', async () => {
    for await (const block of archive.snapshots(reading, ['u'], [...Array(m).keys()])) {
      expect(block.from).toBe(0);
      break;
    }
    const [one, other] = [archive.snapshots(reading, ['u'], [4, 5, 6, 7, 8, 9, 10, 11, 12]), archive.snapshots(reading, ['u'], [30, 31, 32, 33, 34, 35, 36, 37, 38])];
    for (;;) {
      const [a, b] = await Promise.all([one.next(), other.next()]);
      expect(a.done).toBe(b.done);
      if (a.done || b.done) break;
      expect([a.value.values[0], b.value.values[0]]).toEqual([value(4 + a.value.from, 0), value(30 + b.value.from, 0)]);
    }
  });

  it('are refused outside of the record, of unknown fields, and of none', async () => {
    const refused = (names: string[], indices: number[]) => expect(archive.snapshots(reading, names, indices).next()).rejects;
    await refused(['u'], [m]).toMatchObject({ code: 'range-invalid', message: `there is no snapshot ${m}: the record has ${m}, counted from 0.` });
    await refused(['v'], [0]).toMatchObject({ code: 'not-found' });
    await refused([], [0]).toMatchObject({ code: 'invalid-input' });
    expect(await archive.snapshots(reading, ['u'], []).next()).toMatchObject({ done: true });
  });

  it('go with a survey that reports its progress', async () => {
    const progress: number[] = [];
    const survey = await archive.survey(reading, (done, total) => progress.push(done / total));
    expect(progress[progress.length - 1]).toBe(1);
    expect(progress.every((part, i) => i === 0 || part >= progress[i - 1])).toBe(true);
    expect([...survey.stamps!.subarray(0, 3)]).toEqual([0, 0.5, 1]);
    expect(survey.fields[0]).toMatchObject({ snapshots: m, nodes: n, changedNodes: n });
    // Every node grows by 1000 a snapshot: ||u_j - u_{j-1}|| = 1000 sqrt(n).
    expect(survey.fields[0].stepChange[7] / (1000 * Math.sqrt(n))).toBeCloseTo(1, 12);
  });
});

describe('one snapshot over the limit', () => {
  it('is refused with both sizes', async () => {
    const archive = await openIsolated([folder.write('small.npy', npy("{'descr': '<f8', 'fortran_order': False, 'shape': (2, 100), }", new Uint8Array(1600)))], { snapshotBytes: 799 });
    const reading = await archive.propose();
    await expect(archive.snapshots(reading, ['small'], [0]).next()).rejects.toMatchObject({ code: 'limit-exceeded', details: { expected: 799, actual: 800 } });
    await archive.close();
  }, 60_000);
});
