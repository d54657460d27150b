/**
 * Surveys built from plain numbers: the statistics are computed from the values given, as the reading pass would, so a test
 * states a record and not the numbers that a check wants to see.
 */
import { createHash } from 'node:crypto';
import type { CheckId, Finding } from '#contract/finding.ts';
import type { ArchiveContents, AxisName, ElementType, Reading, TimeSource } from '#contract/reading.ts';
import type { CampaignDemands, Check, CheckSubject, Judgement } from '../../../../server/engine/checks/check.ts';
import { thresholdsOf } from '../../../../server/engine/checks/policy.ts';
import type { FieldSurvey, Survey, SurveyAxis } from '../../../../server/engine/survey.ts';

export interface FieldPlan {
  name?: string;
  path?: string;
  /** [m][n] */
  values: number[][];
  dtype?: ElementType;
  unit?: string | null;
  axes?: AxisName[];
  declaredFill?: number | null;
  allocated?: number | null;
}

export interface AxisPlan {
  name: AxisName;
  nodes?: number[] | null;
  edges?: number[] | null;
  count?: number;
  dtype?: ElementType;
  unit?: string | null;
  path?: string | null;
}

export interface RecordPlan {
  stamps?: ArrayLike<number> | null;
  stampType?: ElementType;
  time?: TimeSource | null;
  timeUnit?: string | null;
  fields?: FieldPlan[];
  axes?: AxisPlan[];
  layout?: Reading['layout'];
  spaceWeights?: number[] | null;
  timeWeights?: number[] | null;
  contents?: Partial<ArchiveContents>;
  reading?: Partial<Reading>;
  mismatches?: Survey['mismatches'];
}

const wellKnownFills = [1e20, 9.969209968386869e36, -9999, -999, -32767];

/** Index of the first snapshot from which to the end all values are one constant; the number of such snapshots. */
function trailingConstant(values: number[][]): number {
  const last = values.at(-1)?.[0];
  let count = 0;
  for (let j = values.length - 1; j >= 0 && values[j].every((value) => Object.is(value, last)); j--) count++;
  return count;
}

export function fieldSurvey(plan: FieldPlan): FieldSurvey {
  const { values } = plan;
  const finite = values.map((snapshot) => snapshot.filter(Number.isFinite));
  const candidates = [...new Set([...(plan.declaredFill == null ? [] : [plan.declaredFill]), ...wellKnownFills])];
  const name = plan.name ?? 'u';
  return {
    path: plan.path ?? `/${name}`,
    name,
    dtype: plan.dtype ?? 'float64',
    unit: plan.unit === undefined ? 'm s-1' : plan.unit,
    snapshots: values.length,
    nodes: values[0]?.length ?? 0,
    min: Float64Array.from(finite, (snapshot) => (snapshot.length ? Math.min(...snapshot) : NaN)),
    max: Float64Array.from(finite, (snapshot) => (snapshot.length ? Math.max(...snapshot) : NaN)),
    mean: Float64Array.from(finite, (snapshot) =>
      snapshot.length ? snapshot.reduce((a, b) => a + b, 0) / snapshot.length : NaN,
    ),
    norm: Float64Array.from(finite, (snapshot) => Math.sqrt(snapshot.reduce((a, b) => a + b * b, 0))),
    nonFinite: Float64Array.from(values, (snapshot) => snapshot.filter((value) => !Number.isFinite(value)).length),
    firstNonFinite: Float64Array.from(values, (snapshot) => snapshot.findIndex((value) => !Number.isFinite(value))),
    fill: candidates
      .map((value) => {
        const counts = Float64Array.from(values, (snapshot) => snapshot.filter((v) => v === value).length);
        const firstSnapshot = counts.findIndex((count) => count > 0);
        return {
          value,
          declared: value === plan.declaredFill,
          counts,
          firstSnapshot,
          firstNode: firstSnapshot < 0 ? -1 : values[firstSnapshot].indexOf(value),
        };
      })
      .filter((candidate) => candidate.firstSnapshot >= 0),
    hash: values.map((snapshot) => createHash('sha256').update(Float64Array.from(snapshot)).digest('hex').slice(0, 16)),
    stepChange: Float64Array.from(values, (snapshot, j) =>
      j === 0 ? 0 : Math.sqrt(snapshot.reduce((sum, value, i) => sum + (value - values[j - 1][i]) ** 2, 0)),
    ),
    changedNodes: (values[0] ?? []).filter((value, i) => values.some((snapshot) => snapshot[i] !== value)).length,
    spread: Math.max(
      0,
      ...finite.map((snapshot) => (snapshot.length ? Math.max(...snapshot) - Math.min(...snapshot) : 0)),
    ),
    allocated: plan.allocated ?? null,
    trailingFill: trailingConstant(values),
  };
}

/** m snapshots of n values that all differ and never repeat. */
export function movingValues(m: number, n = 4): number[][] {
  return Array.from({ length: m }, (_, j) =>
    Array.from({ length: n }, (_, i) => Math.sin(1 + 0.7 * i + 0.13 * j) + 0.01 * j),
  );
}

export function uniform(m: number, step = 0.01, start = 0): number[] {
  return Array.from({ length: m }, (_, j) => start + j * step);
}

/** A record with one moving field on a uniform axis x, unless told otherwise. */
export function makeSurvey(plan: RecordPlan = {}): Survey {
  const stamps = plan.stamps === undefined ? null : plan.stamps;
  const fields = plan.fields ?? [{ values: movingValues(stamps?.length ?? 5) }];
  const surveyed = fields.map(fieldSurvey);
  const nodes = surveyed[0]?.nodes ?? 0;
  const axes: SurveyAxis[] = (plan.axes ?? [{ name: 'x', nodes: uniform(nodes, 0.5) }]).map((axis) => ({
    name: axis.name,
    path: axis.path === undefined ? `/${axis.name}` : axis.path,
    unit: axis.unit === undefined ? 'm' : axis.unit,
    count: axis.count ?? axis.nodes?.length ?? (axis.edges ? axis.edges.length - 1 : 0),
    nodes: axis.nodes ? Float64Array.from(axis.nodes) : null,
    edges: axis.edges ? Float64Array.from(axis.edges) : null,
    dtype: axis.dtype ?? 'float64',
    periodic: null,
  }));
  const time: TimeSource | null =
    plan.time === undefined
      ? stamps
        ? { kind: 'array', path: '/t', unit: plan.timeUnit === undefined ? 's' : plan.timeUnit }
        : null
      : plan.time;
  const stored = axes.map((axis) => axis.name);
  return {
    contents: {
      format: 'hdf5',
      files: [{ name: 'run.h5', bytes: 1000 }],
      arrays: fields.map((field, i) => ({
        path: surveyed[i].path,
        shape: [surveyed[i].snapshots, surveyed[i].nodes],
        dtype: surveyed[i].dtype,
        byteOrder: 'little',
        order: 'C',
        file: 0,
        chunks: null,
        filters: [],
        attributes: {},
        dimensionScales: null,
        fillValue: field.declaredFill ?? null,
        allocated: field.allocated ?? null,
      })),
      groups: [],
      outsideLinks: [],
      writerOpen: false,
      damaged: [],
      ...plan.contents,
    },
    reading: {
      layout: plan.layout ?? 'time-first',
      time,
      fields: fields.map((field, i) => ({
        path: surveyed[i].path,
        name: surveyed[i].name,
        unit: surveyed[i].unit,
        axes: field.axes ?? ['time', ...stored],
        why: 'given by the test',
      })),
      axes: axes.map((axis) => ({
        name: axis.name,
        path: axis.path,
        edges: axis.edges ? `${axis.path}_edges` : null,
        unit: axis.unit,
        count: axis.count,
        periodic: null,
        why: 'given by the test',
      })),
      spaceWeights: null,
      timeWeights: null,
      parameters: [],
      roles: [],
      ...plan.reading,
    },
    stamps: stamps ? Float64Array.from(stamps) : null,
    stampType: stamps ? (plan.stampType ?? 'float64') : null,
    stampPath: time?.kind === 'array' ? time.path : null,
    axes,
    spaceWeights: plan.spaceWeights ? Float64Array.from(plan.spaceWeights) : null,
    timeWeights: plan.timeWeights ? Float64Array.from(plan.timeWeights) : null,
    fields: surveyed,
    mismatches: plan.mismatches ?? [],
  };
}

export const noDemands: CampaignDemands = { fields: [], parameters: [] };

export function makeSubject(plan: RecordPlan | null = {}, more: Partial<CheckSubject> = {}): CheckSubject {
  return {
    survey: plan === null ? null : makeSurvey(plan),
    failure: null,
    checksum: null,
    demands: noDemands,
    parameters: {},
    otherGrids: [],
    timeRule: null,
    ...more,
  };
}

/** One check at its default thresholds. */
export function judge(check: Check, subject: CheckSubject, thresholds: Record<string, number> = {}): Judgement[] {
  return check.judge(subject, { ...thresholdsOf(check, { thresholds: {} }), ...thresholds });
}

export function idsOf(findings: Finding[]): CheckId[] {
  return findings.map((finding) => finding.id);
}
