/** The small arrays of release.h5, from the files of the build. */
import { readFile } from 'node:fs/promises';
import { join } from 'node:path';
import type { BuildSummary } from '#contract/dataset.ts';
import type { ReleaseFacts } from '../engine/release/facts.ts';
import type { WrittenArray } from '../reading/hdf5-writer.ts';

/** Data of an NPY file of our own making. */
async function data(folder: string, name: string): Promise<ArrayBuffer> {
  const file = await readFile(join(folder, name));
  const start = 10 + file.readUInt16LE(8);
  return file.buffer.slice(file.byteOffset + start, file.byteOffset + file.length) as ArrayBuffer;
}

interface Fields {
  fields: { name: string; unit: string | null; axes: { name: string; unit: string | null; nodes: number[] | null }[] }[];
}

export async function releaseArrays(folder: string, build: BuildSummary): Promise<WrittenArray[]> {
  const double = async (path: string, name: string, attributes: WrittenArray['attributes'], shape?: number[]): Promise<WrittenArray> => {
    const values = new Float64Array(await data(folder, name));
    return { path, shape: shape ?? [values.length], values, attributes };
  };
  const mean = new Float64Array(await data(folder, 'mean.npy'));
  const { fields } = JSON.parse(await readFile(join(folder, 'fields.json'), 'utf8')) as Fields;
  const arrays: WrittenArray[] = [
    await double('/time', 'time.npy', { long_name: 'time stamp of each snapshot' }),
    { path: '/run_index', shape: [build.columns], values: new Int32Array(await data(folder, 'run_index.npy')), attributes: { runs: build.records.map((record) => record.run).join(', ') } },
    await double('/time_weights', 'time_weights.npy', { rule: build.timeRule }),
    await double('/space_weights', 'space_weights.npy', { rule: build.spaceRule.chosen }),
    { path: '/mean', shape: mean.length === build.rows ? [build.rows] : [mean.length / build.rows, build.rows], values: mean, attributes: { subtracted: build.centred } },
    { path: '/split', shape: [build.columns], values: Int32Array.from(new Int8Array(await data(folder, 'split.npy'))), attributes: { codes: '0 train, 1 validation, 2 test, 3 left out' } },
    await double('/singular_values', 'singular_values.npy', { floor: build.spectrum.floor }),
  ];
  for (const [i, field] of fields.entries()) {
    const rows = build.fields[i];
    arrays.push({ path: `/fields/${field.name}/rows`, shape: [2], values: Int32Array.of(rows.from, rows.from + rows.count), attributes: { unit: field.unit ?? '', shape: rows.shape.join(' x ') } });
    for (const axis of field.axes) if (axis.nodes) arrays.push({ path: `/fields/${field.name}/${axis.name}`, shape: [axis.nodes.length], values: Float64Array.from(axis.nodes), attributes: { unit: axis.unit ?? '' } });
  }
  return arrays;
}

export function releaseAttributes(facts: ReleaseFacts): Record<string, string | number> {
  return { title: `${facts.dataset.title}, release ${facts.version}`, licence: facts.licence, handling: facts.handlingLabel, contact: facts.contact, caution: 'training data, not a validated model: see datasheet.md', matrix_sha256: facts.build.matrixSha256 };
}
