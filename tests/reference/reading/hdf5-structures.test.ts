/** What the file's own structures say, against h5py; and every array read, against NumPy. */
import { afterAll, describe, expect, it } from 'vitest';
import { isReal, numbersOf } from '../../../server/reading/element.ts';
import { defaultLimits } from '../../../server/reading/limits.ts';
import { openArchive } from '../../../server/reading/open-archive.ts';
import { sizeOf } from '../../../server/reading/stored-array.ts';
import { writtenBy } from './written-by-python.ts';

type Facts = Record<string, Record<string, { shape: number[]; allocated: number; sum: number | null; last: number | null }>>;

const written = writtenBy<Facts>('structures.py');
afterAll(() => written.remove());

describe.each(['earliest', 'latest'])('HDF5 written with libver %s', (version) => {
  it('is described and read as h5py does', async () => {
    const archive = await openArchive([written.file(`${version}.h5`)], defaultLimits);
    const { contents } = archive;
    expect(contents.damaged).toEqual([]);
    expect(contents.format).toBe('hdf5');
    const facts = written.facts[version];
    expect(contents.arrays.map(({ path }) => path).sort()).toEqual(Object.keys(facts).sort());
    for (const info of contents.arrays) {
      const fact = facts[info.path];
      expect(info.shape, info.path).toEqual(fact.shape);
      expect(info.allocated, `allocated of ${info.path}`).toBe(fact.allocated);
      const kind = /^\/(little|big)_([iuf])(\d)$/.exec(info.path);
      if (kind) {
        const name = { i: 'int', u: 'uint', f: 'float' }[kind[2]];
        expect(info.dtype).toBe(`${name}${8 * Number(kind[3])}`);
        expect(info.byteOrder).toBe(kind[3] === '1' ? 'none' : kind[1]);
      }
      if (!isReal(info.dtype) || fact.sum === null) continue;
      const stored = archive.array(info.path);
      const values = numbersOf(stored.readBox(info.shape.map(() => 0), info.shape), info.dtype, sizeOf(info.shape));
      let sum = 0;
      for (const value of values) sum += value;
      expect(sum, `sum of ${info.path}`).toBeCloseTo(fact.sum, 5);
      expect(values[values.length - 1], `last of ${info.path}`).toBe(fact.last);
    }
    const named = Object.fromEntries(contents.arrays.map((info) => [info.path, info]));
    expect(named['/filled'].fillValue).toBe(-9999);
    expect(named['/filled_big_endian'].fillValue).toBe(-999);
    expect(named['/contiguous'].fillValue).toBeNull();
    expect(named['/truth'].dtype).toBe('bool');
    expect(named['/complex'].dtype).toBe('complex128');
    expect(named['/complex_big_endian']).toMatchObject({ dtype: 'complex64', byteOrder: 'big' });
    for (const path of ['/long_double', '/narrow', '/bfloat16', '/record']) expect(named[path].dtype, path).toBe('other');
    expect(named['/text'].dtype).toBe('string');
    expect(named['/fixed_gzip'].filters.map(({ name, available }) => [name, available])).toEqual([['shuffle', true], ['deflate', true]]);
    expect(archive.unlimited('/growing_last')).toEqual([false, false, true]);
    archive.close();
  });
});
