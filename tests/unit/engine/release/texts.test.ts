import { describe, expect, it } from 'vitest';
import { crate } from '../../../../server/engine/release/crate.ts';
import { datasheet } from '../../../../server/engine/release/datasheet.ts';
import { facts } from './release-facts.ts';

const payload = [{ path: 'data/matrix.npy', sha256: 'b'.repeat(64), bytes: 1088 }, { path: 'data/datasheet.md', sha256: 'e'.repeat(64), bytes: 900 }];

interface Entity {
  '@id': string;
  '@type': string | string[];
  [key: string]: unknown;
}

describe('the datasheet', () => {
  const sheet = datasheet(facts);

  it.each([
    ['what it is', /# Wake velocity, release 3[^]*20 rows and 12 columns in float32/],
    ['fields with units and rows', /\| u \| m\/s \| 0 to 9 \| 2 x 5 \|\n\| p \| none given \| 10 to 19/],
    ['how it was made', /1\. select: 1 run with 14 snapshots\.\n2\. order: 2 repeated stamps dropped\./],
    ['its sources by checksum, and who handed them in', new RegExp(`re100\\.h5, SHA-256 ${'d'.repeat(64)}, handed in by Mary`)],
    ['what was waived, by whom and why', /time\/gap: There is a gap\. Waived by Grace: The pump was changed\./],
    ['that it is training data and no validated model', /training data, not a validated model[^]*verification and validation[^]*safety-related[^]*export-control/],
    ['whom to ask and how to cite it', /Questions: wakes@example\.org[^]*Cite as: Ada \(2026\): Wake velocity, release 3/],
    ['the rounding of the cast', /rounding error of the cast: 1\.50e-8/],
  ])('says %s', (_, pattern) => {
    expect(sheet).toMatch(pattern);
  });
});

describe('the crate (RO-Crate 1.1)', () => {
  const document = JSON.parse(crate(facts, payload)) as { '@context': unknown; '@graph': Entity[] };
  const graph = new Map(document['@graph'].map((entity) => [entity['@id'], entity]));
  const actions = document['@graph'].filter((entity) => entity['@type'] === 'CreateAction');

  it('has the descriptor that the specification demands', () => {
    expect(graph.get('ro-crate-metadata.json')).toMatchObject({ '@type': 'CreativeWork', conformsTo: { '@id': 'https://w3id.org/ro/crate/1.1' }, about: { '@id': './' } });
    expect(graph.get('./')).toMatchObject({ '@type': 'Dataset', name: expect.any(String), description: expect.any(String), datePublished: expect.stringMatching(/^2026/), license: expect.anything() });
  });

  it('names every entity once, and refers to none that is not there', () => {
    expect(graph.size).toBe(document['@graph'].length);
    const refers = (value: unknown): string[] => {
      if (Array.isArray(value)) return value.flatMap(refers);
      if (value === null || typeof value !== 'object') return [];
      const { '@id': id, ...rest } = value as Entity;
      return [...(id && Object.keys(rest).length === 0 ? [id] : []), ...Object.values(rest).flatMap(refers)];
    };
    const missing = document['@graph'].flatMap(refers).filter((id) => !graph.has(id) && !id.startsWith('https://'));
    expect(missing).toEqual([]);
  });

  it('leads from the sources, by their SHA-256, through every step to the matrix', () => {
    expect(actions.map((action) => action.name)).toEqual(['select', 'order']);
    expect(actions[0].object).toEqual([{ '@id': `urn:sha256:${'d'.repeat(64)}` }]);
    expect(actions[1].object).toEqual([{ '@id': actions[0]['@id'] }]);
    expect(actions[1].result).toEqual([{ '@id': 'data/matrix.npy' }]);
  });

  it('knows every person by what they did', () => {
    expect(graph.get(`urn:sha256:${'d'.repeat(64)}`)!.creator).toEqual({ '@id': '#person-mary' });
    expect(actions[0].agent).toEqual({ '@id': '#person-ada' });
    expect(graph.get('#approval')!.agent).toEqual({ '@id': '#person-grace' });
  });
});
