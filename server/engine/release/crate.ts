/** RO-Crate 1.1 metadata of a release: every source by SHA-256, every step as an action, every person by role. */
import { citation, type ReleaseFacts } from './facts.ts';
import type { BagFile } from './bag.ts';

const person = (id: string) => `#person-${id}`;

export function crate(facts: ReleaseFacts, payload: BagFile[]): string {
  const people = new Map([facts.builtBy, facts.approvedBy, ...facts.sources.map((source) => source.handedInBy), ...facts.waivers.map((waiver) => waiver.by)].map((each) => [each.id, each]));
  const sources = facts.sources.flatMap((source) => source.files.map((file) => ({
    '@id': `urn:sha256:${file.sha256}`, '@type': 'File', name: file.name, contentSize: String(file.bytes), sha256: file.sha256, creator: { '@id': person(source.handedInBy.id) }, dateCreated: source.handedInAt, description: `Archive of run ${source.run}`,
  })));
  const actions = facts.build.steps.map((step, i) => ({
    '@id': `#step-${i + 1}`, '@type': 'CreateAction', name: step.step, description: step.sentence, instrument: { '@id': '#pennyweight' }, agent: { '@id': person(facts.builtBy.id) },
    object: i === 0 ? sources.map((source) => ({ '@id': source['@id'] })) : [{ '@id': `#step-${i}` }], result: i === facts.build.steps.length - 1 ? [{ '@id': 'data/matrix.npy' }] : [], endTime: facts.build.builtAt,
  }));
  const graph = [
    { '@id': 'ro-crate-metadata.json', '@type': 'CreativeWork', conformsTo: { '@id': 'https://w3id.org/ro/crate/1.1' }, about: { '@id': './' } },
    {
      '@id': './', '@type': 'Dataset', name: `${facts.dataset.title}, release ${facts.version}`, description: facts.dataset.description || facts.dataset.title, datePublished: facts.approvedAt, license: facts.licence,
      version: String(facts.version), creditText: citation(facts), creator: { '@id': person(facts.builtBy.id) }, hasPart: payload.map((file) => ({ '@id': file.path })), mentions: [...actions.map((action) => ({ '@id': action['@id'] })), { '@id': '#approval' }],
    },
    ...payload.map((file) => ({ '@id': file.path, '@type': 'File', name: file.path.split('/').pop(), contentSize: String(file.bytes), sha256: file.sha256 })),
    ...sources, ...actions,
    { '@id': '#approval', '@type': 'AssessAction', name: 'approval', agent: { '@id': person(facts.approvedBy.id) }, object: { '@id': './' }, endTime: facts.approvedAt, description: facts.note || 'Approved by a steward who had no part in making it.' },
    { '@id': '#pennyweight', '@type': 'SoftwareApplication', name: 'Pennyweight', version: facts.program },
    ...[...people.values()].map((each) => ({ '@id': person(each.id), '@type': 'Person', name: each.name })),
  ];
  return `${JSON.stringify({ '@context': ['https://w3id.org/ro/crate/1.1/context', { sha256: 'https://w3id.org/ro/terms/workflow-run#sha256' }], '@graph': graph }, null, 2)}\n`;
}
