/**
 * Sound HDF5 and NPY files with bytes changed, exchanged and cut at random places (seeded) through the reading process.
 * Each ends in time with an answer or a typed error; the process that asked lives on, and no reader stays behind.
 */
import { readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { errorCodes, type PennyweightError } from '#contract/error.ts';
import { compiledReading } from './compiled-reading.ts';
import { writtenBy } from './written-by-python.ts';

const written = writtenBy('mutable.py');
let compiled: Awaited<ReturnType<typeof compiledReading>>;
beforeAll(async () => {
  compiled = await compiledReading();
});
afterAll(() => {
  compiled.remove();
  written.remove();
});

/** mulberry32 (T. Ettinger, public domain). */
function seeded(seed: number): () => number {
  let state = seed;
  return () => {
    state = (state + 0x6d2b79f5) | 0;
    let z = Math.imul(state ^ (state >>> 15), 1 | state);
    z = (z + Math.imul(z ^ (z >>> 7), 61 | z)) ^ z;
    return ((z ^ (z >>> 14)) >>> 0) / 2 ** 32;
  };
}

/** Most damage is done to the first kilobytes, where the structures are. */
function mutate(original: Uint8Array, random: () => number): Uint8Array {
  const bytes = Uint8Array.from(original);
  const place = () => Math.floor((random() < 0.7 ? Math.min(4096, bytes.length) : bytes.length) * random());
  switch (Math.floor(random() * 5)) {
    case 0:
      for (let k = 0; k < 1 + random() * 4; k++) bytes[place()] = Math.floor(random() * 256);
      return bytes;
    case 1:
      for (let k = 0; k < 1 + random() * 3; k++) bytes[place()] ^= 1 << Math.floor(random() * 8);
      return bytes;
    case 2: {
      const at = place();
      return bytes.fill(random() < 0.5 ? 0xff : 0, at, at + 1 + Math.floor(random() * 16));
    }
    case 3: {
      const [from, to] = [place(), place()];
      bytes.copyWithin(to, from, from + 8 + Math.floor(random() * 64));
      return bytes;
    }
    default:
      return bytes.subarray(0, 8 + Math.floor(random() * bytes.length));
  }
}

const count = 120;
const limits = { contentsMillis: 20_000, surveyMillis: 20_000, requestMillis: 20_000 };

describe('mutated archives', () => {
  it(`${count} of them each end in an answer or a typed error`, async () => {
    const originals = ['earliest.h5', 'latest.h5', 'steps.h5', 'u.npy'].map((name) => ({ name, bytes: readFileSync(join(written.folder, name)) }));
    const random = seeded(20261201);
    const outcomes = new Map<string, number>();
    const files = Array.from({ length: count }, (_, i) => {
      const { name, bytes } = originals[i % originals.length];
      const path = join(written.folder, `mutated_${i}_${name}`);
      writeFileSync(path, mutate(bytes, random));
      return { name: `mutated_${i}_${name}`, path };
    });
    async function readOne(file: (typeof files)[number]): Promise<string> {
      try {
        const archive = await compiled.openIsolated([file], limits);
        try {
          const reading = await archive.propose();
          const survey = await archive.survey(reading);
          for await (const { values, count: many, nodes } of archive.snapshots(reading, reading.fields.map(({ name }) => name).slice(0, 1), [0])) {
            expect(values).toHaveLength(many * nodes);
          }
          return `read, ${survey.fields.length > 0 ? 'with fields' : 'without fields'}`;
        } finally {
          await archive.close();
        }
      } catch (cause) {
        // By name: the compiled reading room has a class of its own.
        expect((cause as Error).name, `${file.name}: ${String(cause)}`).toBe('PennyweightError');
        const refusal = cause as PennyweightError;
        expect(errorCodes).toContain(refusal.code);
        expect(refusal.message.length).toBeGreaterThan(20);
        return refusal.code;
      }
    }
    const queue = [...files];
    await Promise.all(
      Array.from({ length: 2 }, async () => {
        for (let file = queue.shift(); file; file = queue.shift()) {
          const started = performance.now();
          const outcome = await readOne(file);
          expect(performance.now() - started, file.name).toBeLessThan(90_000);
          outcomes.set(outcome, (outcomes.get(outcome) ?? 0) + 1);
        }
      }),
    );
    expect([...outcomes.values()].reduce((sum, many) => sum + many, 0)).toBe(count);
    // Both kinds of ending are met, so the test looks at both.
    expect(outcomes.get('read, with fields')).toBeGreaterThan(10);
    expect(outcomes.get('file-unreadable')).toBeGreaterThan(10);
  }, 600_000);
});
