/**
 * Makes the bag of an approved draft (RFC 8493): hard links of the built arrays, release.h5, texts, manifests; reads every file back and
 * compares its SHA-256; publishes the folder; then one transaction makes the release. It can be repeated from any point.
 */
import { createHash, randomUUID } from 'node:crypto';
import { createReadStream } from 'node:fs';
import { link, mkdir, stat, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { PennyweightError } from '#contract/error.ts';
import { bagDeclaration, bagInfo, manifest, payloadOxum, type BagFile } from '../engine/release/bag.ts';
import { crate } from '../engine/release/crate.ts';
import { datasheet } from '../engine/release/datasheet.ts';
import { writeReleaseHdf5 } from '../reading/release-writer.ts';
import { findingsOfDraft } from '../services/draft-findings.ts';
import { draftToRelease, finishRelease } from '../services/release-making.ts';
import { releaseFacts } from '../services/release-facts.ts';
import { MatrixReader } from '../services/matrix-store.ts';
import type { JobHandler } from './handle.ts';
import { releaseArrays, releaseAttributes } from './release-arrays.ts';

const arrays = ['matrix.npy', 'time.npy', 'run_index.npy', 'time_weights.npy', 'space_weights.npy', 'mean.npy', 'split.npy', 'singular_values.npy', 'modes.npy', 'coefficients.npy', 'spectrum.csv', 'weights.json', 'fields.json', 'recipe.json'];

async function hashOf(path: string): Promise<string> {
  const hash = createHash('sha256');
  for await (const chunk of createReadStream(path, { highWaterMark: 4 << 20 })) hash.update(chunk as Buffer);
  return hash.digest('hex');
}

export const release: JobHandler = async (app, job) => {
  const found = await draftToRelease(app, job.subjectId);
  if (!found) return;
  const { draft, build, version } = found;
  const facts = await releaseFacts(app, draft, version);
  const built = app.storage.folder('builds', found.buildFolder);
  const report = (part: number, phase: string) => job.report({ done: part * build.bytes, total: 3 * build.bytes, unit: 'bytes', phase });
  const scratch = await app.storage.scratchFolder(`release-${job.id}`);
  try {
    const data = join(scratch, 'data');
    await mkdir(data);
    for (const name of arrays) await link(join(built, name), join(data, name));
    report(0, 'writing release.h5');
    const reader = await MatrixReader.open(join(built, 'matrix.npy'), build);
    try {
      const { rows, columns, type } = build;
      const blocks = watched(reader.columnBlocks(), job.signal, (first) => report(first / columns, 'writing release.h5'));
      await writeReleaseHdf5(join(data, 'release.h5'), { rows, columns, type, blocks }, await releaseArrays(built, build), releaseAttributes(facts));
    } finally {
      await reader.close();
    }
    const findings = (await findingsOfDraft(app, draft)).map((finding) => ({ ...finding, findingId: undefined }));
    await writeFile(join(data, 'findings.json'), `${JSON.stringify(findings, null, 2)}\n`);
    const sheet = datasheet(facts);
    await writeFile(join(data, 'datasheet.md'), sheet);
    job.signal.throwIfAborted();

    report(1, 'checksums');
    const payload: BagFile[] = [];
    for (const name of [...arrays, 'release.h5', 'findings.json', 'datasheet.md']) {
      const path = join(data, name);
      payload.push({ path: `data/${name}`, sha256: await hashOf(path), bytes: (await stat(path)).size });
      job.signal.throwIfAborted();
    }
    const matrix = payload.find((file) => file.path === 'data/matrix.npy')!;
    if (matrix.sha256 !== build.matrixSha256) throw new PennyweightError('checksum-mismatch', 'The built matrix is not the one that was approved: build and submit the draft again.', { expected: build.matrixSha256, actual: matrix.sha256 });
    const tags: Record<string, string> = {
      'bagit.txt': bagDeclaration,
      'bag-info.txt': bagInfo([['Source-Organization', facts.campaign.title], ['Contact-Name', facts.contact], ['External-Description', `${facts.dataset.title}, release ${version}. ${facts.dataset.description}`], ['External-Identifier', `${facts.campaign.slug}/${facts.dataset.slug}@${version}`], ['Bagging-Date', facts.approvedAt.slice(0, 10)], ['Payload-Oxum', payloadOxum(payload)], ['Bag-Software-Agent', `Pennyweight ${facts.program}`]]),
      'manifest-sha256.txt': manifest(payload),
      'ro-crate-metadata.json': crate(facts, payload),
    };
    const tagFiles: BagFile[] = [];
    for (const [name, text] of Object.entries(tags)) {
      await writeFile(join(scratch, name), text);
      tagFiles.push({ path: name, sha256: createHash('sha256').update(text).digest('hex'), bytes: Buffer.byteLength(text) });
    }
    const tagManifest = manifest(tagFiles);
    await writeFile(join(scratch, 'tagmanifest-sha256.txt'), tagManifest);
    const files = [...payload, ...tagFiles, { path: 'tagmanifest-sha256.txt', sha256: createHash('sha256').update(tagManifest).digest('hex'), bytes: Buffer.byteLength(tagManifest) }];

    report(2, 'reading the bag back');
    for (const file of files.filter((each) => each.path !== 'data/matrix.npy')) {
      if ((await hashOf(join(scratch, file.path))) !== file.sha256) throw new PennyweightError('checksum-mismatch', `${file.path} of the bag did not read back as written: the disk is not to be trusted.`, { path: file.path });
      job.signal.throwIfAborted();
    }
    const folder = `${draft.id}-${randomUUID().slice(0, 8)}`;
    await app.storage.publish(scratch, 'releases', folder);
    await finishRelease(app, job.caller, draft.id, { version, folder, files, datasheet: sheet, waivers: facts.waivers, jobId: job.id });
  } finally {
    await app.storage.discard(scratch);
  }
};

async function* watched<Block extends { first: number }>(blocks: AsyncIterable<Block>, signal: AbortSignal, report: (first: number) => void): AsyncGenerator<Block> {
  for await (const block of blocks) {
    signal.throwIfAborted();
    report(block.first);
    yield block;
  }
}
