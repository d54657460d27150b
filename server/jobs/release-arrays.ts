/** The small arrays of release.h5, from the files of the build. */
import type { BuildSummary } from '#contract/dataset.ts';
import type { ReleaseFacts } from '../engine/release/facts.ts';
import type { WrittenArray } from '../reading/hdf5-writer.ts';
import { builtCodes, builtDoubles, builtFields, builtRunIndex } from '../services/built-arrays.ts';

export async function releaseArrays(folder: string, build: BuildSummary): Promise<WrittenArray[]> {
  const double = async (path: string, name: Parameters<typeof builtDoubles>[1], attributes: WrittenArray['attributes']): Promise<WrittenArray> => {
    const values = await builtDoubles(folder, name);
    return { path, shape: [values.length], values, attributes };
  };
  const mean = await builtDoubles(folder, 'mean.npy');
  const { fields, time_unit: timeUnit } = await builtFields(folder);
  const arrays: WrittenArray[] = [
    await double('/time', 'time.npy', { long_name: 'time stamp of each snapshot', unit: timeUnit ?? '' }),
    { path: '/run_index', shape: [build.columns], values: await builtRunIndex(folder), attributes: { runs: build.records.map((record) => record.run).join(', ') } },
    await double('/time_weights', 'time_weights.npy', { rule: build.timeRule }),
    await double('/space_weights', 'space_weights.npy', { rule: build.spaceRule.chosen }),
    { path: '/mean', shape: mean.length === build.rows ? [build.rows] : [mean.length / build.rows, build.rows], values: mean, attributes: { subtracted: build.centred } },
    { path: '/split', shape: [build.columns], values: Int32Array.from(await builtCodes(folder)), attributes: { codes: '0 train, 1 validation, 2 test, 3 left out' } },
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
