/** Archives in the product: handed in over HTTP by their contributor, checked by the real worker. */
import { execFileSync } from 'node:child_process';
import { readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';
import type { Archive, StoredFinding } from '#contract/archive.ts';
import { routes } from '#contract/routes.ts';
import { unique, type Person, type TestApp } from '../setup/app.ts';
import { signedInSender, type TusSender } from './tus-sender.ts';

export interface Facts {
  snapshot: number[][];
  min: number[];
  max: number[];
  norm: number[];
  trapezoid: number[];
}

export interface Yard {
  facts: Facts;
  bytesOf(name: string): Buffer;
  /** Hands files in as one archive; resolves when its check has ended. */
  handIn(names: string | string[], more?: { campaign?: string; run?: string; solver?: string; parameters?: Record<string, number> }): Promise<Archive>;
  /** The archive when no job is at it any more; the last one must have ended well. */
  settled(id: string): Promise<Archive>;
  findings(id: string): Promise<StoredFinding[]>;
}

export async function openYard(app: TestApp, campaign: string, contributor: Person): Promise<Yard> {
  const folder = app.parts.config.storage;
  const facts = JSON.parse(execFileSync('/usr/bin/python3', ['tests/api/archives.py', folder], { encoding: 'utf8' })) as Facts;
  const sender: TusSender = await signedInSender(app.url, contributor);
  const bytesOf = (name: string) => readFileSync(join(folder, name));

  async function settled(id: string): Promise<Archive> {
    for (;;) {
      const { jobId } = await contributor.call(routes.getArchive, { params: { archive: id } });
      const job = await contributor.call(routes.getJob, { params: { job: jobId! } });
      if (job.state === 'done') {
        const archive = await contributor.call(routes.getArchive, { params: { archive: id } });
        // A later check may have been asked for meanwhile.
        if (archive.jobId === jobId) return archive;
      }
      if (job.state === 'failed' || job.state === 'cancelled') return contributor.call(routes.getArchive, { params: { archive: id } });
      await new Promise((resolve) => setTimeout(resolve, 50));
    }
  }

  return {
    facts, bytesOf, settled,
    async handIn(names, more = {}) {
      const files = [names].flat().map((name) => ({ name, bytes: statSync(join(folder, name)).size }));
      const delivery = await contributor.call(routes.createDelivery, { params: { campaign: more.campaign ?? campaign }, body: { run: more.run ?? unique('run'), solver: more.solver ?? '', parameters: more.parameters ?? {}, files } });
      for (const [position, { name }] of files.entries()) await sender.send(delivery, bytesOf(name), { position });
      const { archive } = await contributor.call(routes.getDelivery, { params: { delivery: delivery.id } });
      return settled(archive!);
    },
    findings: async (id) => (await contributor.call(routes.listArchiveFindings, { params: { archive: id } })).findings,
  };
}
