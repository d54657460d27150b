import { describe, expect, it } from 'vitest';
import { numberInName, stepPrefix, stepsOf } from '../../../server/reading/step-groups.ts';
import { array, contentsOf } from './made-contents.ts';

describe('the number in a step name', () => {
  it.each([
    ['step_000120', 120, 'step_'], ['Timestep_7', 7, 'Timestep_'], ['0.0125', 0.0125, ''], ['t=1.5e-3', 0.0015, 't='], ['-2', -2, ''], ['step-12', 12, 'step-'],
    ['1e3', 1000, ''], ['u2', 2, 'u'],
  ])('%s is %d', (name, value, prefix) => {
    expect([numberInName(name), stepPrefix(name)]).toEqual([value, prefix]);
  });

  it.each(['grid', 'step_12a', '', 'final'])('%j has none', (name) => {
    expect([numberInName(name), stepPrefix(name)]).toEqual([null, null]);
  });
});

describe('the steps of a template', () => {
  const contents = contentsOf([
    ...['step_10', 'step_9', 'step_100', 'final'].map((name) => array(`/run/${name}/u`, [4])),
    array('/run/step_9/deeper/u', [4]),
    array('/run/step_9/v', [4]),
    array('/other/step_1/u', [4]),
  ]);

  it('are ordered by number, not as text', () => {
    expect(stepsOf(contents, '/run/{step}/u').map(({ group }) => group)).toEqual(['/run/step_9', '/run/step_10', '/run/step_100']);
  });

  it('are those whose group has the dataset at that place', () => {
    expect(stepsOf(contents, '/run/{step}/deeper/u')).toHaveLength(1);
    expect(stepsOf(contents, '/{step}/u')).toEqual([]);
  });
});
