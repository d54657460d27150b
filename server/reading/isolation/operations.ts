/** The reading process's side of each request. */
import { PennyweightError } from '#contract/error.ts';
import { readVector, type Archive } from '../archive.ts';
import { mismatchesOf } from '../fit.ts';
import { defaultLimits, type Limits } from '../limits.ts';
import { openArchive } from '../open-archive.ts';
import { adapt } from '../proposal/adapt.ts';
import { evidenceOf } from '../proposal/evidence.ts';
import { propose } from '../proposal/propose.ts';
import { readVectors } from '../reading-vectors.ts';
import { planSnapshots, readBlock, type SnapshotPlan } from '../snapshot-blocks.ts';
import { surveyArchive } from '../survey/survey-archive.ts';
import type { OperationName, Operations } from './protocol.ts';

export interface Surroundings {
  report(done: number, total: number, path: string): Promise<void>;
  /** Puts values into the exchange file. */
  writeBlock(values: Float64Array, position: number): void;
}

type Handlers = { [Name in OperationName]: (take: Operations[Name]['take'], around: Surroundings) => Operations[Name]['answer'] | Promise<Operations[Name]['answer']> };

/** Room for one block of each plan; the file is sparse, so what is not used costs nothing. */
const slotBytes = 2 ** 31;

export function operations(): Handlers {
  let archive: Archive | null = null;
  let limits: Limits = defaultLimits;
  const plans = new Map<number, { plan: SnapshotPlan; slot: number }>();
  let planCount = 0;

  function opened(): Archive {
    if (!archive) throw new PennyweightError('wrong-state', 'no archive is open in the reading process; open one first.');
    return archive;
  }
  function planOf(id: number): { plan: SnapshotPlan; slot: number } {
    const plan = plans.get(id);
    if (!plan) throw new PennyweightError('wrong-state', 'the snapshots of this request were given up already; ask again.');
    return plan;
  }

  return {
    async open(take) {
      if (archive) throw new PennyweightError('wrong-state', 'an archive is open already; one reading process reads one archive.');
      limits = take.limits;
      archive = await openArchive(take.files, limits);
      return archive.contents;
    },
    propose: () => propose(opened().contents, evidenceOf(opened())),
    apply({ reading }) {
      const { contents } = opened();
      const adapted = adapt(contents, reading, evidenceOf(opened()));
      return { reading: adapted, mismatches: mismatchesOf(contents, adapted) };
    },
    vectors: ({ reading }) => readVectors(opened(), reading),
    vector: ({ path }) => readVector(opened(), path),
    survey: ({ reading }, { report }) => surveyArchive(opened(), reading, limits, report),
    plan({ reading, fields, indices }) {
      const plan = planSnapshots(opened(), reading, fields, indices, limits);
      let slot = 0;
      while ([...plans.values()].some((other) => other.slot === slot)) slot++;
      const id = ++planCount;
      plans.set(id, { plan, slot });
      return { plan: id, nodes: plan.nodes, blocks: plan.blocks.length, position: slot * slotBytes };
    },
    block({ plan: id, block }, { writeBlock }) {
      const { plan, slot } = planOf(id);
      const { from, count, values } = readBlock(plan, block);
      writeBlock(values, slot * slotBytes);
      return { from, count };
    },
    forget({ plan }) {
      plans.delete(plan);
      return null;
    },
  };
}
