import { describe, expect, it } from 'vitest';
import { bytesText, durationText, percentText, quantityText, rateText } from '../../src/components/number-format.ts';
import { readNumber } from '../../src/components/NumberField.tsx';

describe('a quantity', () => {
  it('shows no rounding artefact', () => {
    expect(quantityText(0.1 + 0.2)).toBe('0.3');
    expect(quantityText(1.005 * 3)).toBe('3.015');
    expect(quantityText(-0)).toBe('0');
  });
  it('leaves whole numbers whole and goes to powers of ten where digits would be noise', () => {
    expect(quantityText(123456789)).toBe('123456789');
    expect(quantityText(6.02214076e23)).toBe('6.02214e23');
    expect(quantityText(1.5e-8)).toBe('1.5e-8');
    expect(quantityText(-0.0001)).toBe('-0.0001');
  });
  it('says what is no number', () => {
    expect([NaN, Infinity, -Infinity, null, undefined].map((value) => quantityText(value))).toEqual(['not a number', 'infinite', '-infinite', '-', '-']);
  });
  it('read back is within half a unit of its last digit', () => {
    for (const value of [Math.PI, 1 / 3, 98765.4321, 1e-300 / 7, 2 ** 70]) expect(Math.abs(Number(quantityText(value, 6)) / value - 1)).toBeLessThanOrEqual(5e-6);
  });
});

describe('shares, bytes, rates and durations', () => {
  it('never claims all or nothing wrongly', () => {
    expect([0, 1e-9, 0.5, 0.999999, 1].map((share) => percentText(share))).toEqual(['0 %', '< 0.1 %', '50 %', '> 99.9 %', '100 %']);
  });
  it('counts bytes by 1024 with three digits', () => {
    expect([0, 1, 1023, 1024, 1536, 1024 ** 2 - 1, 5 * 1024 ** 3].map(bytesText)).toEqual(['0 B', '1 B', '1023 B', '1 KiB', '1.5 KiB', '1 MiB', '5 GiB']);
    expect(bytesText(NaN)).toBe('-');
  });
  it('says nothing of an unknown rate', () => {
    expect([rateText(null, 'bytes'), rateText(2 * 1024 ** 2, 'bytes'), rateText(12.345, 'snapshots')]).toEqual(['', '2 MiB/s', '12.3 snapshots/s']);
  });
  it('gives durations in two units at most', () => {
    expect([0.2, 1, 59.6, 200, 3600, 3725, 90_000, null].map(durationText)).toEqual(['under 1 s', '1 s', '1 min', '3 min 20 s', '1 h', '1 h 2 min', '1 d 1 h', '']);
  });
});

describe('a number as it is typed', () => {
  it('takes powers of ten and a typographic minus, and refuses what could mean two things', () => {
    expect(['', ' 1e-3 ', '.5', '−4', '1,5', '0x10', '1e999', 'Infinity', '3 m'].map(readNumber)).toEqual([null, 1e-3, 0.5, -4, undefined, undefined, undefined, undefined, undefined]);
  });
});
