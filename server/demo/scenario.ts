/**
 * The demo's invented scenario: "Saltmere basin", a warm outfall under a tide. Three runs by three habits of solvers:
 *   gentle  adaptive step on a graded grid: uneven stamps, nothing wrong
 *   spring  the same, restarted from a checkpoint before the last output: stamps overlap and some are repeated
 *   neap    a graded grid, one output written twice and a long pause in the output
 * No real place, group or person; every archive says so in its attributes.
 */
import { gradedNodes, solvePlume, type PlumeRecord } from './plume-solver.ts';

export interface DemoArray {
  path: string;
  shape: number[];
  values: Float64Array | Float32Array;
  attributes: Record<string, string | number>;
}
export interface DemoRun {
  run: string;
  fileName: string;
  solver: string;
  parameters: Record<string, number>;
  note: string;
  attributes: Record<string, string | number>;
  arrays: DemoArray[];
}

const grid = { x: gradedNodes(72, 1200, 2.2), y: gradedNodes(44, 600, 0) };

/** Snapshots of a record by index, in the given order. */
function pick(record: PlumeRecord, indices: number[]): PlumeRecord {
  const n = record.nx * record.ny;
  const take = (values: Float32Array) => {
    const out = new Float32Array(indices.length * n);
    indices.forEach((from, to) => out.set(values.subarray(from * n, (from + 1) * n), to * n));
    return out;
  };
  return { ...record, time: Float64Array.from(indices, (i) => record.time[i]!), temperature: take(record.temperature), u: take(record.u), v: take(record.v) };
}

function archiveOf(run: string, fileName: string, parameters: Record<string, number>, note: string, record: PlumeRecord): DemoRun {
  const shape = [record.time.length, record.ny, record.nx];
  return {
    run, fileName, parameters, note, solver: 'saltmere-fv',
    attributes: { title: `Saltmere basin, run ${run} (invented demo data, no real place)`, ...parameters },
    arrays: [
      { path: '/time', shape: [record.time.length], values: record.time, attributes: { units: 's' } },
      { path: '/x', shape: [record.nx], values: grid.x, attributes: { units: 'm' } },
      { path: '/y', shape: [record.ny], values: grid.y, attributes: { units: 'm' } },
      { path: '/temperature', shape, values: record.temperature, attributes: { units: 'K', long_name: 'temperature excess' } },
      { path: '/u', shape, values: record.u, attributes: { units: 'm/s' } },
      { path: '/v', shape, values: record.v, attributes: { units: 'm/s' } },
    ],
  };
}

const range = (from: number, to: number) => Array.from({ length: to - from }, (_, i) => from + i);

export function demoRuns(): DemoRun[] {
  const base = { ...grid, kappa: 0.05, period: 44_000, end: 60_000, cfl: 0.42 };
  const gentle = solvePlume({ ...base, excess: 8, rate: 4e-4, tide: 0.10, outputEvery: 20 });
  const spring = solvePlume({ ...base, excess: 8, rate: 4e-4, tide: 0.22, outputEvery: 40 });
  const neap = solvePlume({ ...base, excess: 11, rate: 4e-4, tide: 0.06, outputEvery: 14 });

  // The restart goes back to a checkpoint seven outputs earlier; the run then writes those outputs once more.
  const half = Math.floor(spring.time.length / 2);
  const restarted = pick(spring, [...range(0, half + 7), ...range(half, spring.time.length)]);
  // One output is written twice, and five outputs are lost with a full scratch disk.
  const third = Math.floor(neap.time.length / 3);
  const twice = pick(neap, [...range(0, third), third - 1, ...range(third, 2 * third), ...range(2 * third + 5, neap.time.length)]);

  return [
    archiveOf('gentle', 'gentle.h5', { outfall_excess: 8, tide_amplitude: 0.1 }, 'Adaptive step, output every 20 steps.', gentle),
    archiveOf('spring', 'spring.h5', { outfall_excess: 8, tide_amplitude: 0.22 }, 'Killed by the queue once and restarted from a checkpoint.', restarted),
    archiveOf('neap', 'neap.h5', { outfall_excess: 11, tide_amplitude: 0.06 }, 'Scratch disk was full for a while.', twice),
  ];
}
