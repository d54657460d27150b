/** How the person at the command line says what the arrays mean: a saved reading, and the time or that there is none. */
import { reading as readingSchema, type Reading } from '#contract/reading.ts';
import { readJsonFile } from './json-file.ts';
import { parseNumber, wrongUsage } from './usage.ts';

export const readingOptions = {
  reading: { type: 'string' },
  'time-start': { type: 'string' },
  'time-step': { type: 'string' },
  ensemble: { type: 'boolean' },
} as const;

export const readingHelp = `  --reading FILE     a saved reading (JSON) instead of the proposed one
  --time-start T     with --time-step DT: stamps T, T + DT, T + 2 DT, …
  --time-step DT
  --ensemble         the snapshots are samples without time`;

export interface ReadingChoice {
  reading: Reading | null;
  time: { start: number; step: number } | 'ensemble' | null;
}

interface Values {
  reading?: string;
  'time-start'?: string;
  'time-step'?: string;
  ensemble?: boolean;
}

export function readingChoice(values: Values): ReadingChoice {
  const { 'time-start': start, 'time-step': step } = values;
  if ((start === undefined) !== (step === undefined))
    throw wrongUsage('--time-start and --time-step are given together.');
  if (values.ensemble && start !== undefined) throw wrongUsage('--ensemble and --time-start exclude each other.');
  const reading = values.reading === undefined ? null : readJsonFile('--reading', values.reading, readingSchema);
  if (values.ensemble) return { reading, time: 'ensemble' };
  if (start === undefined || step === undefined) return { reading, time: null };
  const time = { start: parseNumber('--time-start', start), step: parseNumber('--time-step', step) };
  if (time.step <= 0) throw wrongUsage(`--time-step takes a positive number, not "${step}".`);
  return { reading, time };
}

export function applyChoice(proposal: Reading, { reading, time }: ReadingChoice): Reading {
  const chosen = reading ?? proposal;
  if (time === null) return chosen;
  if (time === 'ensemble') return { ...chosen, time: { kind: 'ensemble' } };
  const unit = chosen.time && chosen.time.kind !== 'ensemble' ? chosen.time.unit : null;
  return { ...chosen, time: { kind: 'generated', ...time, unit } };
}
