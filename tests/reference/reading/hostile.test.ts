/** Files that are no archives, damaged archives, and archives that reach out: each gets a clear answer, and nothing else happens. */
import { readdirSync, readFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { ErrorCode, PennyweightError } from '#contract/error.ts';
import type { IsolatedArchive, Limits } from '../../../server/reading/isolated.ts';
import { compiledReading } from './compiled-reading.ts';
import { writtenBy } from './written-by-python.ts';

const written = writtenBy('hostile.py');
let compiled: Awaited<ReturnType<typeof compiledReading>>;
beforeAll(async () => {
  compiled = await compiledReading();
});
afterAll(() => {
  compiled.remove();
  written.remove();
});

async function refusalOf(work: () => Promise<unknown>): Promise<PennyweightError> {
  try {
    await work();
  } catch (cause) {
    return cause as PennyweightError;
  }
  expect.unreachable('a refusal was expected');
}

async function using<T>(name: string, work: (archive: IsolatedArchive) => Promise<T>, limits: Partial<Limits> = {}): Promise<T> {
  const archive = await compiled.openIsolated([written.file(name)], limits);
  try {
    return await work(archive);
  } finally {
    await archive.close();
  }
}

/** Process ids of the reading processes that `parent` started. */
function childrenOf(parent: number): number[] {
  return readdirSync('/proc')
    .filter((name) => /^\d+$/.test(name))
    .filter((pid) => {
      try {
        const fields = readFileSync(`/proc/${pid}/stat`, 'latin1').replace(/^.*\) /s, '').split(' ');
        return Number(fields[1]) === parent && fields[0] !== 'Z' && readFileSync(`/proc/${pid}/cmdline`, 'latin1').includes('isolation/child');
      } catch {
        // It ended while we looked.
        return false;
      }
    })
    .map(Number);
}

const survey = async (archive: IsolatedArchive) => archive.survey(await archive.propose());

const unopened: [name: string, code: ErrorCode, sentence: RegExp][] = [
  ['text.h5', 'unsupported-format', /text\.h5 is text; hand in/],
  ['archive.npz', 'unsupported-format', /is a ZIP or NPZ container; these are not read yet/],
  ['noise.h5', 'unsupported-format', /of no known format \(it begins with the bytes/],
  ['pickle.npy', 'unsupported-format', /a pickled Python object, which is never loaded/],
  ['empty.h5', 'file-unreadable', /is empty/],
  ['truncated.h5', 'file-unreadable', /is cut off: \d+ bytes are expected and \d+ are there/],
  ['head_only.h5', 'file-unreadable', /upload it again/],
  ['truncated.npy', 'file-unreadable', /is cut off: its shape \(6, 4, 5\) of <f4 needs 608 bytes and 300 are there/],
  ['header_cut.npy', 'file-unreadable', /is cut off: 128 bytes are expected and 40 are there/],
  ['pickled.npy', 'file-unreadable', /pickled Python objects, which are never loaded/],
  ['record.npy', 'file-unreadable', /records with named parts/],
  ['claims.npy', 'file-unreadable', /its shape \(1000000, 1000000\) of <f8 needs 8000000000128 bytes and 192 are there/],
  ['pipe', 'file-unreadable', /is not a regular file/],
  ['missing.h5', 'file-unreadable', /could not be opened/],
];

describe('a file that is no archive', () => {
  it.each(unopened)('%s is refused as %s', async (name, code, sentence) => {
    const refusal = await refusalOf(() => compiled.openIsolated([written.file(name)]));
    expect([refusal.name, refusal.code]).toEqual(['PennyweightError', code]);
    expect(refusal.message).toMatch(sentence);
  });

  it('counts the bytes that are missing', async () => {
    const refusal = await refusalOf(() => compiled.openIsolated([written.file('truncated.npy')]));
    expect(refusal.details).toMatchObject({ expected: 608, actual: 300 });
  });
});

describe('links and storage outside of the archive', () => {
  it('external links are listed and not followed, not even to a pipe', async () => {
    await using('external_link.h5', async (archive) => {
      const contents = await archive.contents();
      expect(contents.outsideLinks).toEqual([
        { path: '/fifo', kind: 'external-link', target: 'pipe:/x' },
        { path: '/link', kind: 'external-link', target: 'outside.h5:/secret' },
      ]);
      expect(contents.arrays.map(({ path }) => path)).toEqual(['/t', '/u']);
      expect((await survey(archive)).fields.map(({ path, max }) => [path, Math.max(...max)])).toEqual([['/u', 119]]);
    });
  });

  it.each([
    ['virtual.h5', '/v', 'virtual-source', 'outside.h5:secret'],
    ['raw.h5', '/passwd', 'external-storage', '/etc/passwd'],
  ])('%s: the data are neither read nor replaced by fill values', async (name, path, kind, target) => {
    await using(name, async (archive) => {
      expect((await archive.contents()).outsideLinks).toEqual([{ path, kind, target }]);
      const reading = await archive.propose();
      expect(reading.fields.map((field) => field.path)).toEqual(['/u']);
      expect(reading.roles.find((role) => role.path === path)).toMatchObject({ role: 'ignored', why: expect.stringContaining(target) });
      const forced = { ...reading, fields: [{ ...reading.fields[0], path, name: 'forced' }] };
      expect(await archive.fits(forced)).toMatchObject([{ path, message: expect.stringContaining('lie outside') }]);
      expect((await archive.survey(forced)).fields).toEqual([]);
      expect(await refusalOf(() => archive.snapshots(forced, ['forced'], [0]).next())).toMatchObject({ code: 'reading-mismatch' });
      expect(await refusalOf(() => archive.vector(path))).toMatchObject({ code: 'reading-mismatch' });
    });
  });
});

describe('shapes of the container that have no end', () => {
  it('circles of hard and soft links are walked once', async () => {
    await using('circles.h5', async (archive) => {
      const { arrays, groups, damaged } = await archive.contents();
      expect(damaged).toEqual([]);
      expect(arrays.map(({ path }) => path).sort()).toEqual(['/a/b/c', '/again', '/t']);
      expect(groups.map(({ path }) => path)).toEqual(['/', '/a', '/a/b']);
    });
  });

  it('groups nested 3,000 deep are read down to the limit, and the rest is reported', async () => {
    await using('deep.h5', async (archive) => {
      const { damaged, groups } = await archive.contents();
      expect(groups).toHaveLength(65);
      expect(damaged).toEqual([{ path: `${'/g'.repeat(65)}`, reason: expect.stringMatching(/deeper than 64/) }]);
      expect((await survey(archive)).fields).toHaveLength(1);
    });
  });

  it('more objects than the limit are refused', async () => {
    const refusal = await refusalOf(() => using('many.h5', async () => undefined, { objects: 50 }));
    expect([refusal.code, refusal.details]).toEqual(['limit-exceeded', { file: 'many.h5', limit: 50 }]);
  });
});

describe('data that are more than they seem', () => {
  it.each(['claims.h5', 'claims_contiguous.h5'])('%s: a shape of 10^12 elements is not read through', async (name) => {
    await using(name, async (archive) => {
      const { arrays } = await archive.contents();
      expect(arrays.find(({ path }) => path === '/u')).toMatchObject({ shape: [1e6, 1e6], allocated: 0 });
      const refusal = await refusalOf(() => survey(archive));
      expect(refusal.code).toBe('limit-exceeded');
      expect(refusal.message).toMatch(/the shape of \/u claims 4000000000000 bytes, and the archive has \d+/);
    });
  });

  it('a chunk over the limit is not decompressed', async () => {
    await using('bomb.h5', async (archive) => {
      const refusal = await refusalOf(() => survey(archive));
      expect(refusal).toMatchObject({ code: 'limit-exceeded', details: { path: '/u', actual: 400 * 2 ** 20 } });
      expect(archive.peakBytes()).toBeLessThan(300e6);
    });
  });

  it('a small vector in a huge chunk is not decompressed either', async () => {
    await using('vector_bomb.h5', async (archive) => {
      const expected = { code: 'limit-exceeded', details: { path: '/x', actual: 800 * 2 ** 20 } };
      expect(await refusalOf(() => archive.vector('/x'))).toMatchObject(expected);
      expect(await refusalOf(() => survey(archive))).toMatchObject(expected);
      expect(archive.peakBytes()).toBeLessThan(300e6);
    });
  });

  it('a chunk within the limit that needs more memory than allowed ends the reader, not us', async () => {
    const refusal = await refusalOf(() => using('bomb.h5', survey, { chunkBytes: 2 ** 30, memoryBytes: 300e6 }));
    expect(refusal.code).toBe('file-unreadable');
    expect(refusal.message).toMatch(/needed \d+ MB of memory, and 300 MB is the limit/);
  });

  it('a damaged chunk is an error with its place, never old memory', async () => {
    await using('damaged_chunk.h5', async (archive) => {
      const refusal = await refusalOf(() => survey(archive));
      expect(refusal).toMatchObject({ code: 'file-unreadable', details: { path: '/u' } });
      const reading = await archive.propose();
      const first = await archive.snapshots(reading, ['u'], [2]).next();
      expect([...(first.value as { values: Float64Array }).values.subarray(0, 3)]).toEqual([40, 41, 42]);
      expect(await refusalOf(() => archive.snapshots(reading, ['u'], [3]).next())).toMatchObject({ code: 'file-unreadable' });
    });
  });

  it.each([
    ['filter_unknown.h5', 40000],
    ['filter_zfp.h5', 32013],
  ])('%s: a filter that cannot be undone is named', async (name, id) => {
    await using(name, async (archive) => {
      const { arrays } = await archive.contents();
      expect(arrays.find(({ path }) => path === '/u')?.filters).toMatchObject([{ id, available: false }]);
      const reading = await archive.propose();
      expect(reading.roles.find(({ path }) => path === '/u')?.why).toContain(`(${id}) is not available`);
    });
  });
});

describe('an unusual but sound archive', () => {
  it('with a prefix before the superblock is read', async () => {
    await using('prefixed.h5', async (archive) => expect((await survey(archive)).fields[0].max[5]).toBe(119));
  });

  it('that a writer left open is read, and says so', async () => {
    await using('writer_open.h5', async (archive) => {
      expect((await archive.contents()).writerOpen).toBe(true);
      expect((await survey(archive)).fields[0].max[5]).toBe(119);
    });
    await using('sound.h5', async (archive) => expect((await archive.contents()).writerOpen).toBe(false));
  });

  it('of netCDF-4 is known by its properties', async () => {
    await using('netcdf.h5', async (archive) => expect((await archive.contents()).format).toBe('netcdf4'));
  });

  it('of NPY that goes on behind its array is read, and the rest reported', async () => {
    await using('longer.npy', async (archive) => {
      expect((await archive.contents()).damaged).toEqual([{ path: 'longer.npy', reason: expect.stringMatching(/goes on for 80 bytes/) }]);
      expect((await survey(archive)).fields).toHaveLength(1);
    });
  });
});

describe('the reading process', () => {
  it('is ended at its deadline', async () => {
    const refusal = await refusalOf(() => compiled.openIsolated([written.file('deep.h5')], { contentsMillis: 1, depth: 3000 }));
    expect(refusal.code).toBe('file-unreadable');
    expect(refusal.message).toMatch(/took longer than 0\.001 s/);
  });

  it('knows nothing of our environment, and is gone after close', async () => {
    process.env.SECRET_OF_THIS_TEST = 'x';
    const archive = await compiled.openIsolated([written.file('sound.h5')]);
    delete process.env.SECRET_OF_THIS_TEST;
    const readers = childrenOf(process.pid);
    expect(readers).toHaveLength(1);
    const names = readFileSync(`/proc/${readers[0]}/environ`, 'latin1').split('\0').map((entry) => entry.split('=')[0]).filter(Boolean);
    expect(names.filter((name) => !name.startsWith('NODE_CHANNEL_'))).toEqual([]);
    await archive.close();
    expect(childrenOf(process.pid)).toEqual([]);
  });

  it('answers nobody after it was closed', async () => {
    const archive = await compiled.openIsolated([written.file('sound.h5')]);
    await archive.close();
    await archive.close();
    expect(await refusalOf(() => archive.propose())).toMatchObject({ code: 'wrong-state' });
  });
});
