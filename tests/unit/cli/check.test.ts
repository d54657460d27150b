import { mkdirSync, writeFileSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { checkReport, type ArchiveReport } from '#contract/check-report.ts';
import { openIsolated } from '../../../server/reading/isolated.ts';
import { jsonOf, makeArchives, pennyweight, runHere, type Run } from './command-run.ts';

let archives: ReturnType<typeof makeArchives>;
beforeAll(() => {
  archives = makeArchives();
}, 60_000);
afterAll(() => archives.remove());

const command = (names: string[], options: string[]) => ['check', ...names.map(archives.at), '--json', ...options];
/** In a process of its own, and here: the second for what the first has shown already. */
const check = (names: string[], ...options: string[]) => pennyweight(...command(names, options));
const checkHere = (names: string[], ...options: string[]) => runHere(...command(names, options));
const archivesOf = (run: Run): ArchiveReport[] => checkReport.strict().parse(jsonOf(run)).archives;
const idsOf = (run: Run) => archivesOf(run).flatMap((archive) => archive.findings.map((finding) => finding.id));

// Each run starts two processes, on a machine that may be busy.
vi.setConfig({ testTimeout: 90_000 });

describe('pennyweight check', () => {
  it('reports a sound archive with status 0: digest, reading and statistics as NumPy sees them', async () => {
    const run = await check(['sound.h5']);
    expect([run.status, run.err]).toEqual([0, '']);
    const [archive] = archivesOf(run);
    const { expected } = archives;
    expect(archive).toMatchObject({ file: 'sound.h5', bytes: expected.bytes, sha256: expected.sha256, format: 'hdf5' });
    expect(archive.reading).toEqual({
      time: { path: '/t', count: 41, unit: 's' },
      fields: [
        { path: '/u', name: 'u', shape: [41, 6, 12], dtype: 'float64', unit: 'm s-1', axes: ['time', 'y', 'x'] },
      ],
      axes: [
        { name: 'y', path: '/y', count: 6, uniform: false, periodic: null },
        { name: 'x', path: '/x', count: 12, uniform: true, periodic: null },
      ],
    });
    expect(archive.findings.map(({ id, severity, path }) => [id, severity, path])).toEqual([
      ['grid/uneven', 'note', '/y'],
    ]);
    const { min, max, mean, norm } = archive.statistics['/u'];
    expect([min, max]).toEqual([expected.min, expected.max]);
    expect(mean).toBeCloseTo(expected.mean, 12);
    norm.forEach((value, j) => expect(value).toBeCloseTo(expected.norm[j], 10));
  });

  it('ends with 1 for a caution and 2 for a blocker, the worst of all archives', async () => {
    const cautious = await check(['adaptive.h5']);
    expect([cautious.status, idsOf(cautious)]).toEqual([1, ['time/uneven-spacing', 'grid/uneven']]);
    const blocked = await check(['sound.h5', 'restart.h5']);
    expect(blocked.status).toBe(2);
    const [sound, restart] = archivesOf(blocked);
    expect([sound.file, restart.file]).toEqual(['sound.h5', 'restart.h5']);
    expect(restart.findings.filter((finding) => finding.severity === 'blocker').map((finding) => finding.id)).toEqual([
      'time/restart-overlap',
      'value/non-finite',
    ]);
  });

  const hostile = ['text.h5', 'empty.h5', 'cut.h5', 'pickled.npy', 'outside.h5', 'claims.h5'];

  it('reports hostile files beside a sound one as one JSON object, each with one plain blocker, and does not die', async () => {
    const run = await check([...hostile, 'sound.h5']);
    expect([run.status, run.err]).toEqual([2, '']);
    const reports = archivesOf(run);
    const blockers = reports.map((archive) => archive.findings.filter((finding) => finding.severity === 'blocker'));
    expect(blockers.map((found) => found[0]?.id ?? null)).toEqual([
      'file/unreadable',
      'file/unreadable',
      'file/unreadable',
      'file/unreadable',
      'file/outside-link',
      'file/unwritten-data',
      null,
    ]);
    const words = [
      /^text\.h5 is text/,
      /^empty\.h5 is empty/,
      /^cut\.h5 is cut off/,
      /^pickled\.npy holds pickled/,
      /never followed/,
      /holds 0 of the 1000000/,
    ];
    words.forEach((word, i) => expect(blockers[i][0].message).toMatch(word));
    expect(reports.slice(0, 4).map(({ format, reading, statistics }) => [format, reading, statistics])).toEqual(
      Array(4).fill([null, null, {}]),
    );
  });

  it('ends with 2 for a single file that cannot be read', async () => {
    expect((await checkHere(['text.h5'])).status).toBe(2);
  });

  it('takes NPY files with a time vector among them for one archive, and a matrix alone for another', async () => {
    const run = await checkHere(['series/u.npy', 'series/t.npy', 'matrix/X.npy']);
    const [series, matrix] = archivesOf(run);
    expect(series.files.map((file) => file.name)).toEqual(['u.npy', 't.npy']);
    expect(series.reading?.time).toEqual({ path: '/t', count: 41, unit: null });
    expect(series.statistics['/u'].max).toBe(archives.expected.max);
    expect(matrix.findings.map((finding) => finding.id)).toContain('time/missing');
  });

  it('takes start and step, or an ensemble, from the command line', async () => {
    const timed = await checkHere(['matrix/X.npy'], '--time-start', '-1', '--time-step', '0.05');
    expect(archivesOf(timed)[0].reading?.time).toMatchObject({ path: null, count: 41 });
    expect(idsOf(timed)).not.toContain('time/missing');
    const ensemble = await checkHere(['matrix/X.npy'], '--ensemble');
    expect(archivesOf(ensemble)[0].reading?.time).toBeNull();
    expect(idsOf(ensemble)).not.toContain('time/missing');
  });

  it('takes thresholds from a policy', async () => {
    const lenient = archives.at('policy.json');
    writeFileSync(lenient, JSON.stringify({ thresholds: { 'time/gap': { ratio: 5 } } }));
    expect(idsOf(await checkHere(['jump.h5']))).toContain('time/gap');
    expect(idsOf(await checkHere(['jump.h5'], '--policy', lenient))).not.toContain('time/gap');
  });

  it('takes a saved reading', async () => {
    const archive = await openIsolated([{ name: 'unitless.h5', path: archives.at('unitless.h5') }]);
    const reading = await archive.propose();
    await archive.close();
    reading.fields[0].unit = 'm/s';
    const before = await checkHere(['unitless.h5']);
    expect([before.status, idsOf(before)]).toEqual([1, ['value/unit-missing', 'grid/uneven']]);
    writeFileSync(archives.at('reading.json'), JSON.stringify(reading));
    const run = await checkHere(['unitless.h5'], '--reading', archives.at('reading.json'));
    expect([run.status, archivesOf(run)[0].reading?.fields[0].unit]).toEqual([0, 'm/s']);
  });

  it('prints text for a person without --json', async () => {
    const run = await runHere('check', archives.at('restart.h5'));
    expect(run.status).toBe(2);
    expect(run.out).toContain('blocker time/restart-overlap');
    expect(run.out).toContain('Remedy: ');
    expect(() => jsonOf(run)).toThrow();
  });
});

describe('wrong usage', () => {
  it.each<[string, () => string[], string]>([
    ['no command', () => [], 'Usage: pennyweight COMMAND'],
    ['an unknown command', () => ['chekc'], 'no command "chekc"'],
    ['a command that every object has', () => ['constructor'], 'no command "constructor"'],
    ['no file', () => ['check'], 'at least one file'],
    ['a missing file', () => ['check', archives.at('nothing.h5')], 'There is no file'],
    ['a folder', () => ['check', archives.at('series')], 'is a folder'],
    ['a file named twice', () => ['check', archives.at('sound.h5'), archives.at('sound.h5')], 'named twice'],
    ['an unknown option', () => ['check', archives.at('sound.h5'), '--strict'], "'--strict'"],
    ['a start without a step', () => ['check', archives.at('sound.h5'), '--time-start', '0'], 'given together'],
    [
      'a step that is no number',
      () => ['check', archives.at('sound.h5'), '--time-start', '0', '--time-step', 'fast'],
      'takes a number',
    ],
    [
      'a step of zero',
      () => ['check', archives.at('sound.h5'), '--time-start', '0', '--time-step', '0'],
      'positive number',
    ],
    [
      'an ensemble with a start',
      () => ['check', archives.at('sound.h5'), '--ensemble', '--time-start', '0', '--time-step', '1'],
      'exclude each other',
    ],
    [
      'a policy that is no JSON',
      () => ['check', archives.at('sound.h5'), '--policy', archives.at('text.h5')],
      'is not JSON',
    ],
    [
      'a policy that is missing',
      () => ['check', archives.at('sound.h5'), '--policy', archives.at('none.json')],
      'cannot be read',
    ],
  ])('ends with 64 and one message for %s', async (_name, args, words) => {
    const run = await runHere(...args());
    expect([run.status, run.out]).toEqual([64, '']);
    expect(run.err).toContain(words);
    expect(run.err).not.toContain('    at ');
  });

  it('is the same in a process of its own', async () => {
    expect(await pennyweight('chekc')).toEqual(await runHere('chekc'));
    expect(await pennyweight('check', archives.at('nothing.h5'))).toMatchObject({ status: 64, out: '' });
  });

  it('refuses a policy with a threshold that does not exist, and a reading of another form', async () => {
    mkdirSync(archives.at('wrong'));
    writeFileSync(archives.at('wrong/policy.json'), JSON.stringify({ thresholds: { 'time/gap': { rato: 2 } } }));
    writeFileSync(archives.at('wrong/reading.json'), JSON.stringify({ layout: 'sideways' }));
    const policy = await runHere('check', archives.at('sound.h5'), '--policy', archives.at('wrong/policy.json'));
    expect([policy.status, policy.err]).toEqual([64, expect.stringContaining('no threshold "rato"')]);
    const reading = await runHere('check', archives.at('sound.h5'), '--reading', archives.at('wrong/reading.json'));
    expect([reading.status, reading.err]).toEqual([64, expect.stringContaining('expected form at layout')]);
  });

  it.each([[['--help']], [['check', '--help']], [['weights', '--help']]])(
    'explains itself with an example: %j',
    async (args) => {
      const run = await pennyweight(...args);
      expect([run.status, run.err]).toEqual([0, '']);
      expect(run.out).toMatch(/^Usage: pennyweight /);
      expect(run.out).toContain('Example: pennyweight ');
    },
  );
});
