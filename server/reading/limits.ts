/** What reading one archive may cost. Everything outside these limits ends in a typed error, never in a slow server. */
export interface Limits {
  /** resident memory of the reading process, bytes; over it the process is killed */
  memoryBytes: number;
  /** time to open the files and describe their contents, milliseconds */
  contentsMillis: number;
  /** time of a survey */
  surveyMillis: number;
  /** time of any other request (one block of snapshots, one vector) */
  requestMillis: number;
  /** objects (groups, arrays, links) of one file */
  objects: number;
  /** nesting of groups: HDF5 opens a path from the root each time, so depth costs time squared */
  depth: number;
  /** bytes of one attribute, attributes of one object */
  attributeBytes: number;
  attributes: number;
  /** bytes of one chunk: it is decompressed whole */
  chunkBytes: number;
  /** bytes of one snapshot of all asked fields in double precision */
  snapshotBytes: number;
}

/** 600 MB resident: spec, "Reading safely". The others are common practice, no source. */
export const defaultLimits: Limits = {
  memoryBytes: 600e6,
  contentsMillis: 60_000,
  surveyMillis: 30 * 60_000,
  requestMillis: 5 * 60_000,
  objects: 100_000,
  depth: 64,
  attributeBytes: 65_536,
  attributes: 512,
  chunkBytes: 256 * 2 ** 20,
  snapshotBytes: 256 * 2 ** 20,
};
