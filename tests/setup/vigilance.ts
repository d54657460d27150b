/**
 * What no test may do in passing: write to console.error or console.warn without expecting it (a test that does expects
 * it with vi.spyOn(console, 'error').mockImplementation(...)), or leave its database behind.
 */
import { format } from 'node:util';
import { afterAll, afterEach, beforeEach, expect } from 'vitest';
import { openDatabases } from './open-databases.ts';

const original = { error: console.error, warn: console.warn };
let complaints: string[] = [];

beforeEach(() => {
  complaints = [];
  for (const level of ['error', 'warn'] as const) {
    console[level] = (...words: unknown[]) => {
      complaints.push(`console.${level}: ${format(...words)}`);
      original[level](...words);
    };
  }
});

afterEach(() => {
  Object.assign(console, original);
  expect(complaints, 'unexpected output of the code under test').toEqual([]);
});

afterAll(async () => {
  const left = [...openDatabases.values()];
  for (const database of left) await database.drop();
  expect(left.length, 'test databases that were not dropped: call drop() in afterAll').toBe(0);
});
