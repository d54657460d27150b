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
import { planSnapshots, readWindow, type SnapshotPlan } from '../snapshot-blocks.ts';
import { surveyArchive } from '../survey/survey-archive.ts';
import type { FrameHeader } from './frame.ts';
import type { OperationName, Operations } from './protocol.ts';

export interface Surroundings {
  report(done: number, total: number, path: string): Promise<void>;
  sendFrame(header: FrameHeader, values: Float64Array): Promise<void>;
}

type Handlers = { [Name in OperationName]: (take: Operations[Name]['take'], around: Surroundings) => Operations[Name]['answer'] | Promise<Operations[Name]['answer']> };

export function operations(): Handlers {
  let archive: Archive | null = null;
  let limits: Limits = defaultLimits;
  const plans = new Map<number, SnapshotPlan>();
  let planCount = 0;

  function opened(): Archive {
    if (!archive) throw new PennyweightError('wrong-state', 'no archive is open in the reading process; open one first.');
    return archive;
  }
  function planOf(id: number): SnapshotPlan {
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
      const id = ++planCount;
      plans.set(id, plan);
      const windows = plan.windows.length - 1;
      const blocks = Array.from({ length: windows }, (_, w) => Math.ceil((plan.windows[w + 1] - plan.windows[w]) / plan.blockLength));
      return { plan: id, nodes: plan.nodes, windows, blocks };
    },
    async window({ plan: id, window }, { sendFrame }) {
      const plan = planOf(id);
      const { from, count, values } = readWindow(plan, window);
      for (let at = 0; at < count; at += plan.blockLength) {
        const many = Math.min(plan.blockLength, count - at);
        await sendFrame({ plan: id, from: from + at, count: many, nodes: plan.nodes }, values.subarray(at * plan.nodes, (at + many) * plan.nodes));
      }
      return null;
    },
    forget({ plan }) {
      plans.delete(plan);
      return null;
    },
  };
}
