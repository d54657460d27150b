import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { problem } from '#contract/error.ts';
import { weightsReport } from '#contract/weights.ts';
import { jsonOf, makeArchives, pennyweight, runHere, type Run } from './command-run.ts';

let archives: ReturnType<typeof makeArchives>;
beforeAll(() => {
  archives = makeArchives();
}, 60_000);
afterAll(() => archives.remove());

const command = (names: string[], options: string[]) => ['weights', ...names.map(archives.at), '--json', ...options];
/** In a process of its own, and here: the second for what the first has shown already. */
const weigh = (names: string[], ...options: string[]) => pennyweight(...command(names, options));
const weighHere = (names: string[], ...options: string[]) => runHere(...command(names, options));
const reportOf = (run: Run) => weightsReport.strict().parse(jsonOf(run));

// Each run starts two processes, on a machine that may be busy.
vi.setConfig({ testTimeout: 90_000 });

describe('pennyweight weights', () => {
  it('chooses a rule, weighs the grid, and finds the singular values that NumPy finds', async () => {
    const run = await weigh(['sound.h5']);
    expect([run.status, run.err]).toEqual([0, '']);
    const { time, space, spectrum } = reportOf(run);
    const { expected } = archives;
    expect([time.chosen, space.chosen]).toEqual(['simpson', 'tensor']);
    const simpson = time.rules.find((rule) => rule.id === 'simpson')!;
    simpson.weights.forEach((weight, j) => expect(weight).toBeCloseTo(expected.simpson[j], 13));
    for (const rule of time.rules) expect(rule.sum).toBeCloseTo(2, 12);
    expect(space.sum).toBeCloseTo(expected.spaceSum, 12);
    for (let k = 0; k < spectrum!.resolved; k++) {
      // Errors of the correlation route grow as eps sigma_1^2 / sigma_k (spec: weights, numerical honesty).
      const bound = (1e3 * Number.EPSILON * spectrum!.singular_values[0] ** 2) / spectrum!.singular_values[k];
      expect(Math.abs(spectrum!.singular_values[k] - expected.singular_values[k])).toBeLessThan(bound);
    }
    expect(Object.keys(spectrum!.rank)).toEqual(['0.9', '0.99', '0.999', '0.9999']);
  });

  it('uses the rule and the space rule that are asked for', async () => {
    const { time, space } = reportOf(await weighHere(['sound.h5'], '--rule', 'trapezoid', '--space', 'none'));
    expect([time.chosen, space.chosen, space.sum]).toEqual(['trapezoid', 'none', 72]);
  });

  it('refuses a rule with negative weights, with the reason and status 1', async () => {
    const run = await weigh(['jump.h5'], '--rule', 'simpson');
    const { time, spectrum } = reportOf(run);
    expect(run.status).toBe(1);
    expect(time.reason).toMatch(/^Refused: .*negative weight/);
    expect(time.rules.find((rule) => rule.id === 'simpson')).toMatchObject({ admissible: false });
    expect(spectrum).toBeNull();
    expect(run.err).toContain('negative weight');
    expect((await weighHere(['jump.h5'], '--rule', 'auto')).status).toBe(0);
  });

  it('weighs NPY files of one archive, and an ensemble by equal weights', async () => {
    const series = reportOf(await weighHere(['series/u.npy', 'series/t.npy']));
    expect([series.time.chosen, series.space.chosen]).toEqual(['simpson', 'none']);
    const ensemble = reportOf(await weighHere(['matrix/X.npy'], '--ensemble'));
    expect(ensemble.time.chosen).toBe('equal');
    expect(ensemble.time.rules[0].sum).toBe(1);
    // The mean of the squared norms, by either route.
    const mean = archives.expected.norm.reduce((sum, norm) => sum + norm ** 2, 0) / 41;
    expect(ensemble.spectrum!.energy).toBeCloseTo(mean, 9);
  });

  it.each<[string, string, string]>([
    ['restart.h5', 'stamps-invalid', 'stamp 101'],
    ['text.h5', 'unsupported-format', 'text'],
    ['cut.h5', 'file-unreadable', 'cut off'],
    ['field.h5', 'limit-exceeded', '1000000000000 values'],
  ])('says why %s cannot be weighed: %s', async (name, code, words) => {
    const run = await (name === 'restart.h5' ? weigh : weighHere)([name]);
    expect(run.status).toBe(2);
    expect(problem.parse(jsonOf(run))).toMatchObject({ code, detail: expect.stringContaining(words) });
    expect(run.err).toContain(words);
  });

  it('writes weights and modes that NumPy reads: Phi* W Phi = I', async () => {
    const out = archives.at('weighed');
    const run = await weighHere(['sound.h5'], '--rank', '3', '--out', out);
    expect(run.status).toBe(0);
    expect(readdirSync(out).sort()).toEqual([
      'modes.npy',
      'space_weights.npy',
      'spectrum.csv',
      'time.npy',
      'time_weights.npy',
      'weights.json',
    ]);
    const script = `
import numpy as np
phi, w = np.load("modes.npy"), np.load("space_weights.npy")
print(phi.shape, phi.flags.f_contiguous, np.abs(phi.T @ (w[:, None] * phi) - np.eye(3)).max() < 1e-9, np.load("time_weights.npy").sum().round(12), np.load("time.npy")[-1])`;
    expect(execFileSync('/usr/bin/python3', ['-c', script], { cwd: out, encoding: 'utf8' }).trim()).toBe(
      '(72, 3) True True 2.0 2.0',
    );
    expect((await runHere('weights', archives.at('sound.h5'), '--out', out)).status).toBe(64);
  });

  it.each<[string, string[], string]>([
    ['an unknown rule', ['--rule', 'midpoint'], 'there is no rule "midpoint"'],
    ['a rule that is not there yet', ['--rule', 'gauss-legendre'], 'not available yet'],
    ['an unknown space rule', ['--space', 'sphere'], 'there is no rule "sphere"'],
    ['a rank of zero', ['--rank', '0'], 'whole number'],
  ])('ends with 64 for %s', async (_name, options, words) => {
    const run = await runHere('weights', archives.at('sound.h5'), ...options);
    expect([run.status, run.out]).toEqual([64, '']);
    expect(run.err).toContain(words);
  });

  it('takes one archive at a time', async () => {
    const run = await runHere('weights', archives.at('sound.h5'), archives.at('jump.h5'));
    expect([run.status, run.err]).toEqual([64, expect.stringContaining('One archive at a time')]);
  });

  it('prints a table for a person without --json, and leaves nothing behind', async () => {
    const run = await runHere('weights', archives.at('sound.h5'));
    expect(run.out).toMatch(/\* simpson /);
    expect(run.out).toContain('spectrum ');
    expect(existsSync('weights.json')).toBe(false);
  });
});
