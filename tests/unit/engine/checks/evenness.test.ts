import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { axisEvenness, evennessOf } from '../../../../server/engine/checks/evenness.ts';
import type { SurveyAxis } from '../../../../server/engine/survey.ts';
import { uniform } from './survey-factory.ts';

const added = (count: number, step: number, round: (value: number) => number) => {
  const stamps = [0];
  while (stamps.length < count) stamps.push(round(stamps[stamps.length - 1] + round(step)));
  return Float64Array.from(stamps);
};
const axis = (nodes: number[] | null, more: Partial<SurveyAxis> = {}): SurveyAxis => ({
  name: 'x',
  path: '/x',
  unit: 'm',
  count: nodes?.length ?? 0,
  nodes: nodes && Float64Array.from(nodes),
  edges: null,
  dtype: 'float64',
  periodic: null,
  ...more,
});

describe('evennessOf', () => {
  it.each<[string, Float64Array, 'float32' | 'float64', string]>([
    ['stamps added up in double precision', added(2001, 0.001, (value) => value), 'float64', 'even'],
    ['stamps added up in single precision', added(2001, 0.001, Math.fround), 'float32', 'rounded'],
    ['stamps added up in single precision, stored as doubles', added(2001, 0.001, Math.fround), 'float64', 'rounded'],
    [
      'stamps multiplied in single precision',
      Float64Array.from(uniform(2001, 0.001), Math.fround),
      'float32',
      'rounded',
    ],
    ['a step that grows by 0.01 %', Float64Array.from({ length: 100 }, (_, j) => 1.0001 ** j), 'float64', 'uneven'],
  ])('judges %s', (_name, stamps, dtype, verdict) => {
    expect(evennessOf(stamps, dtype).verdict).toBe(verdict);
  });

  it('never takes rounding of even stamps for unevenness, in float32 or with k printed digits', () => {
    const printed = fc.record({
      count: fc.integer({ min: 3, max: 300 }),
      start: fc.integer({ min: 0, max: 1000 }),
      step: fc.double({ min: 0.01, max: 10, noNaN: true }),
      digits: fc.integer({ min: 3, max: 15 }),
    });
    fc.assert(
      fc.property(printed, ({ count, start, step, digits }) => {
        const exact = uniform(count, step, start);
        const largest = exact[count - 1];
        const rounded = Float64Array.from(exact, (stamp) => Number(stamp.toPrecision(digits)));
        // Digits coarser than a quarter of the step do not show what lies between the stamps: not judged as rounding.
        fc.pre(10 ** (Math.floor(Math.log10(largest)) - digits + 1) <= step / 4);
        expect(evennessOf(rounded, 'float64').verdict).not.toBe('uneven');
        const single = Float64Array.from(exact, Math.fround);
        expect(evennessOf(single, 'float32').verdict).not.toBe('uneven');
      }),
      { numRuns: 500 },
    );
  });

  it('finds one stamp that is off by a tenth of the step, whatever the type', () => {
    fc.assert(
      fc.property(fc.integer({ min: 5, max: 200 }), fc.nat(), (count, place) => {
        const stamps = Float64Array.from(uniform(count, 0.25), Math.fround);
        stamps[1 + (place % (count - 2))] += 0.025;
        expect(evennessOf(stamps, 'float32').verdict).toBe('uneven');
      }),
    );
  });
});

describe('axisEvenness', () => {
  it('turns a descending axis round, and takes cell edges where coordinates are unknown', () => {
    expect(axisEvenness(axis([3, 2, 1, 0]))!.verdict).toBe('even');
    expect(axisEvenness(axis(null, { edges: Float64Array.of(0, 1, 3) }))!.verdict).toBe('uneven');
  });

  it.each([
    ['unknown', axis(null)],
    ['empty', axis([])],
    ['turning', axis([0, 2, 1])],
    ['repeated', axis([0, 1, 1])],
    ['undefined', axis([0, NaN, 1])],
  ])('does not judge an axis that is %s', (_name, given) => {
    expect(axisEvenness(given)).toBeNull();
  });
});
