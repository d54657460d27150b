import { existsSync, readdirSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkIds, finding, severities } from '#contract/finding.ts';
import { castStep, orderStep, selectStep, weighStep, windowStep } from '#contract/recipe.ts';
import { catalogue, judgeAll } from '../../../../server/engine/checks/index.ts';
import { unknownThresholds } from '../../../../server/engine/checks/policy.ts';
import { idsOf, makeSubject, movingValues, uniform, type RecordPlan } from './survey-factory.ts';

const noPolicy = { thresholds: {} };
const fileOf = (id: string) => id.replace('/', '-');
const steps = {
  order: orderStep,
  window: windowStep,
  weigh: weighStep,
  cast: castStep,
  select: selectStep.pick({ step: true, fields: true }),
};

/** One of everything: a restart, a repeated stamp, a gap, NaN, copies, a still field, no unit, an uneven axis. */
const troubled: RecordPlan = {
  stamps: [...uniform(20, 1), ...uniform(20, 1, 15), 34, 60, 61, 62, 63, 64],
  fields: [
    {
      values: movingValues(46).map((snapshot, j) =>
        j === 7 ? [NaN, 1, 2, 3] : j === 9 ? movingValues(46)[8] : snapshot,
      ),
      unit: null,
    },
    { name: 'w', values: movingValues(46).map(() => [0, 0, 0, 0]) },
  ],
  axes: [{ name: 'x', nodes: [0, 1, 3, 7] }],
};

describe('the catalogue', () => {
  it('has each id once, in the order of the contract, and each with a title and a source', () => {
    const ids = catalogue.map((check) => check.id);
    expect(new Set(ids).size).toBe(ids.length);
    expect(ids).toEqual(checkIds.filter((id) => ids.includes(id)));
    for (const check of catalogue) {
      expect(severities).toContain(check.severity);
      expect(check.title.length).toBeGreaterThan(5);
      expect(check.source.length).toBeGreaterThan(5);
      for (const threshold of Object.values(check.thresholds)) {
        expect(Number.isFinite(threshold.default)).toBe(true);
        expect(threshold.unit && threshold.meaning).toBeTruthy();
      }
    }
  });

  it('has one file and one test file a check, and no check file that it does not name', () => {
    const folder = 'server/engine/checks';
    for (const { id } of catalogue) {
      expect(existsSync(`${folder}/${fileOf(id)}.ts`), id).toBe(true);
      expect(existsSync(`tests/unit/engine/checks/${fileOf(id)}.test.ts`), id).toBe(true);
    }
    const named = new Set(catalogue.map(({ id }) => `${fileOf(id)}.ts`));
    const files = readdirSync(folder).filter((file) => /^(file|reading|time|grid|value|param|set)-/.test(file));
    expect(files.filter((file) => !named.has(file))).toEqual([]);
  });
});

describe('judgeAll', () => {
  const findings = judgeAll(makeSubject(troubled), noPolicy);

  it('orders by severity, then as the catalogue does', () => {
    const rank = findings.map((each) => [
      severities.indexOf(each.severity),
      catalogue.findIndex(({ id }) => id === each.id),
    ]);
    expect(rank).toEqual([...rank].sort((a, b) => a[0] - b[0] || a[1] - b[1]));
  });

  it('finds each trouble once', () => {
    expect(idsOf(findings)).toEqual([
      'time/duplicate',
      'time/restart-overlap',
      'value/non-finite',
      'value/frozen',
      'time/gap',
      'time/uneven-spacing',
      'value/constant-field',
      'value/unit-missing',
      'grid/uneven',
    ]);
  });

  it('makes findings of the contract, with one plain sentence each', () => {
    for (const each of findings) {
      expect(finding.parse(JSON.parse(JSON.stringify(each)))).toEqual(JSON.parse(JSON.stringify(each)));
      expect(each.message).toMatch(/^\S.*[^.]\.$/);
      expect(each.message).not.toMatch(/undefined|NaN,|\[object/);
    }
  });

  it('offers only remedies that the steps of the recipe take', () => {
    const remedies = findings.flatMap((each) => each.remedy ?? []);
    expect(remedies.length).toBeGreaterThan(5);
    for (const { step, parameters } of remedies)
      expect(() => steps[step as keyof typeof steps].parse({ step, ...parameters })).not.toThrow();
  });

  it('finds the same, in the same order, whatever was judged before and in whichever order fields stand', () => {
    fc.assert(
      fc.property(fc.shuffledSubarray(troubled.fields!, { minLength: 2, maxLength: 2 }), (fields) => {
        expect(idsOf(judgeAll(makeSubject({ ...troubled, fields }), noPolicy))).toEqual(idsOf(findings));
      }),
    );
  });

  it('takes thresholds from the policy, and defaults for the others', () => {
    const lenient = judgeAll(makeSubject(troubled), { thresholds: { 'time/gap': { ratio: 1000 } } });
    expect(idsOf(lenient)).not.toContain('time/gap');
    expect(lenient).toHaveLength(findings.length - 1);
  });

  it('reports an unwritten end once, and judges the rest of the record without it', () => {
    const values = [...movingValues(7), ...uniform(4).map(() => [0, 0, 0, 0])];
    const stamps = [...uniform(7), 0, 0, 0, 0];
    expect(idsOf(judgeAll(makeSubject({ stamps, fields: [{ values }] }), noPolicy))).toEqual(['file/unwritten-data']);
    const raised = judgeAll(makeSubject({ stamps, fields: [{ values }] }), {
      thresholds: { 'file/unwritten-data': { trailingSnapshots: 10 } },
    });
    expect(idsOf(raised)).toEqual(expect.arrayContaining(['value/frozen', 'time/restart-overlap']));
  });

  it('speaks of what it knows when nothing could be read', () => {
    const failure = { message: 'run.h5 is text: hand in the HDF5 file.', path: null };
    const subject = makeSubject(null, {
      failure,
      checksum: { received: 'aa', announced: 'bb' },
      demands: { fields: [], parameters: [{ name: 'Re', unit: null, min: null, max: null }] },
    });
    expect(idsOf(judgeAll(subject, noPolicy))).toEqual(['file/unreadable', 'file/checksum-mismatch']);
  });

  it.each([0, 1, 2, 3])('judges records of %i snapshots and nodes without an error', (size) => {
    for (let nodes = 0; nodes <= 3; nodes++) {
      const subject = makeSubject(
        { stamps: uniform(size), fields: [{ values: movingValues(size, nodes) }] },
        { timeRule: 'simpson' },
      );
      const found = judgeAll(subject, noPolicy);
      if (size > 0 && nodes > 0) expect(found.filter((each) => each.severity === 'blocker')).toEqual([]);
      else expect(idsOf(found)).toContain('reading/incomplete');
    }
  });

  it('judges 100,000 snapshots', () => {
    const m = 100_000;
    const subject = makeSubject({
      stamps: uniform(m, 0.001),
      fields: [{ values: Array.from({ length: m }, (_, j) => [Math.sin(j), j]) }],
    });
    expect(idsOf(judgeAll(subject, noPolicy))).toEqual(['time/even-point-count']);
  });
});

describe('unknownThresholds', () => {
  it('names a check and a threshold that do not exist', () => {
    expect(unknownThresholds(catalogue, { thresholds: { 'time/gap': { ratio: 2 } } })).toEqual([]);
    expect(unknownThresholds(catalogue, { thresholds: { 'time/gap': { factor: 2 }, 'time/gaps': {} } })).toEqual([
      'The check time/gap has no threshold "factor"; it has ratio, growth, share.',
      'The policy names the check "time/gaps", which does not exist.',
    ]);
  });
});
