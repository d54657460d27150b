import { describe, expect, it } from 'vitest';
import { archiveReport } from '#contract/check-report.ts';
import { judgeAll } from '../../../../server/engine/checks/index.ts';
import { describeArchive, recordStatistics } from '../../../../server/engine/report/archive-report.ts';
import { fieldSurvey, makeSubject, movingValues, uniform, type RecordPlan } from '../checks/survey-factory.ts';

const digest = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';
const files = [
  { name: 'u.npy', bytes: 300, sha256: digest },
  { name: 't.npy', bytes: 20, sha256: digest },
];

function reportOf(plan: RecordPlan | null) {
  const subject = makeSubject(
    plan,
    plan === null ? { failure: { message: 'u.npy is empty; upload it again.', path: null } } : {},
  );
  const report = describeArchive(files, digest, subject.survey, judgeAll(subject, { thresholds: {} }));
  return archiveReport.strict().parse(JSON.parse(JSON.stringify(report)));
}

describe('describeArchive', () => {
  it('puts survey and findings into the form of the contract', () => {
    const report = reportOf({ stamps: uniform(5), axes: [{ name: 'x', nodes: [0, 1, 2, 4] }] });
    expect(report).toMatchObject({ file: 'u.npy', bytes: 320, sha256: digest, files, format: 'hdf5' });
    expect(report.reading).toEqual({
      time: { path: '/t', count: 5, unit: 's' },
      fields: [{ path: '/u', name: 'u', shape: [5, 4], dtype: 'float64', unit: 'm s-1', axes: ['time', 'x'] }],
      axes: [{ name: 'x', path: '/x', count: 4, uniform: false, periodic: null }],
    });
    expect(report.findings.map((finding) => finding.id)).toEqual(['grid/uneven']);
  });

  it('gives a record of step groups its time axis', () => {
    const plan: RecordPlan = {
      stamps: uniform(5),
      layout: 'group-per-step',
      fields: [{ path: '/{step}/u', values: movingValues(5), axes: ['x'] }],
    };
    expect(reportOf(plan).reading!.fields[0]).toMatchObject({ shape: [5, 4], axes: ['time', 'x'] });
  });

  it.each<[string, RecordPlan, boolean | null]>([
    ['unknown coordinates', { axes: [{ name: 'x', nodes: null, count: 4 }] }, null],
    [
      'a float32 linspace',
      { axes: [{ name: 'x', dtype: 'float32', nodes: [0, 0.1, 0.2, 0.3].map(Math.fround) }] },
      true,
    ],
    ['a descending axis', { axes: [{ name: 'x', nodes: [3, 2, 1, 0] }] }, true],
    ['an axis that turns back', { axes: [{ name: 'x', nodes: [0, 2, 1, 3] }] }, null],
  ])('says whether an axis is uniform: %s', (_name, plan, uniformity) => {
    expect(reportOf(plan).reading!.axes[0].uniform).toBe(uniformity);
  });

  it('reports an archive that could not be read', () => {
    expect(reportOf(null)).toMatchObject({
      format: null,
      reading: null,
      statistics: {},
      findings: [{ id: 'file/unreadable' }],
    });
  });
});

describe('recordStatistics', () => {
  it('weighs the mean by the finite values of each snapshot', () => {
    const statistics = recordStatistics(
      fieldSurvey({
        values: [
          [1, 2, 3, NaN],
          [5, NaN, NaN, NaN],
          [NaN, NaN, NaN, NaN],
        ],
      }),
    );
    expect(statistics).toEqual({ min: 1, max: 5, mean: 11 / 4, norm: [Math.sqrt(14), 5, 0] });
  });

  it.each<[string, number[][]]>([
    ['no snapshot', []],
    ['no node', [[], []]],
    ['no finite value', [[NaN]]],
  ])('has nothing to say of %s', (_name, values) => {
    expect(recordStatistics(fieldSurvey({ values }))).toMatchObject({ min: null, max: null, mean: null });
  });
});
