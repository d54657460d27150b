/** A JSON file given as an option, checked against its schema; every fault is wrong usage with the place named. */
import { readFileSync } from 'node:fs';
import type { z } from 'zod';
import { wrongUsage } from './usage.ts';

export function readJsonFile<T extends z.ZodType>(option: string, path: string, schema: T): z.output<T> {
  let text: string;
  try {
    text = readFileSync(path, 'utf8');
  } catch {
    throw wrongUsage(`${option}: the file ${path} cannot be read.`);
  }
  let value: unknown;
  try {
    value = JSON.parse(text);
  } catch (cause) {
    throw wrongUsage(`${option}: ${path} is not JSON (${(cause as Error).message}).`);
  }
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  const [issue] = parsed.error.issues;
  const place = issue.path.length > 0 ? ` at ${issue.path.join('.')}` : '';
  throw wrongUsage(`${option}: ${path} does not have the expected form${place}: ${issue.message}.`);
}
