import { describe, expect, it } from 'vitest';
import { selectStep } from '#contract/recipe.ts';
import { valueConstantField } from '../../../../server/engine/checks/value-constant-field.ts';
import { judge, makeSubject, movingValues, type RecordPlan } from './survey-factory.ts';

const still = [1, 2, 3, 4];

describe('value/constant-field', () => {
  it.each<[string, RecordPlan, { inTime: boolean; inSpace: boolean }]>([
    ['a steady field', { fields: [{ values: [still, still, still] }] }, { inTime: true, inSpace: false }],
    [
      'a field uniform in space',
      {
        fields: [
          {
            values: [
              [1, 1],
              [2, 2],
              [3, 3],
            ],
          },
        ],
      },
      { inTime: false, inSpace: true },
    ],
    [
      'one value everywhere and always',
      {
        fields: [
          {
            values: [
              [7, 7],
              [7, 7],
            ],
          },
        ],
      },
      { inTime: true, inSpace: true },
    ],
    [
      'a velocity component that is zero',
      {
        fields: [
          { values: movingValues(3) },
          {
            name: 'w',
            values: [
              [0, 0, 0, 0],
              [0, 0, 0, 0],
              [0, 0, 0, 0],
            ],
          },
        ],
      },
      { inTime: true, inSpace: true },
    ],
    ['one uniform snapshot', { fields: [{ values: [[5, 5, 5]] }] }, { inTime: false, inSpace: true }],
  ])('fires once for %s', (_name, plan, evidence) => {
    const [found, ...more] = judge(valueConstantField, makeSubject(plan));
    expect(more).toEqual([]);
    expect(found.evidence).toMatchObject(evidence);
  });

  it('offers to select the other fields, and nothing when there is no other', () => {
    const [found] = judge(
      valueConstantField,
      makeSubject({ fields: [{ values: movingValues(3) }, { name: 'w', values: [still, still, still] }] }),
    );
    expect(
      selectStep.pick({ step: true, fields: true }).parse({ step: found.remedy!.step, ...found.remedy!.parameters })
        .fields,
    ).toEqual(['u']);
    expect(judge(valueConstantField, makeSubject({ fields: [{ values: [still, still] }] }))[0].remedy).toBeNull();
  });

  it.each<[string, RecordPlan, number]>([
    ['a moving field', {}, 0],
    ['one snapshot that varies in space', { fields: [{ values: [still] }] }, 0],
    ['a signal at one point', { fields: [{ values: [[1], [2], [3]] }] }, 0],
    [
      'a change in the last bit',
      {
        fields: [
          {
            values: [
              [1, 2],
              [1, 2 + 2 ** -51],
            ],
          },
        ],
      },
      0,
    ],
    ['a fluid at rest that starts to move', { fields: [{ values: [[0, 0, 0, 0], ...movingValues(2)] }] }, 0],
    [
      'nothing but NaN',
      {
        fields: [
          {
            values: [
              [NaN, NaN],
              [NaN, NaN],
            ],
          },
        ],
      },
      0,
    ],
    ['no snapshot', { fields: [{ values: [] }] }, 0],
    ['snapshots without nodes', { fields: [{ values: [[], []] }] }, 0],
  ])('is silent for %s', (_name, plan, unwritten) => {
    expect(judge(valueConstantField, makeSubject(plan, { unwritten }))).toEqual([]);
  });
});
