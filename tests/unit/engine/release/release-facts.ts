/** Facts of an invented release. */
import type { ReleaseFacts } from '../../../../server/engine/release/facts.ts';

const sha = (letter: string) => letter.repeat(64);

export const facts: ReleaseFacts = {
  campaign: { slug: 'wakes', title: 'Wakes' },
  dataset: { slug: 'wake-u', title: 'Wake velocity', description: 'Velocity behind a cylinder.' },
  version: 3,
  build: {
    rows: 20, columns: 12, type: 'float32', bytes: 1088, matrixSha256: sha('b'), recipeSha256: sha('c'),
    fields: [{ name: 'u', unit: 'm/s', from: 0, count: 10, shape: [2, 5] }, { name: 'p', unit: null, from: 10, count: 10, shape: [2, 5] }],
    records: [{ archive: '00000000-0000-4000-8000-000000000001', run: 're-100', from: 0, count: 12, parameters: { re: 100 } }],
    timeRule: 'trapezoid', spaceRule: { chosen: 'tensor', why: '', sum: 2, measure: 2 }, duration: 3.5, centred: 'weighted-mean', castError: 1.5e-8,
    split: [{ part: 'train', columns: 9 }, { part: 'test', columns: 3 }],
    spectrum: { singular_values: [2, 1], floor: 1e-7, resolved: 2, energy: 5, rank: { '0.9': 2, '0.99': 2 } }, modes: 2,
    steps: [{ step: 'select', before: '0 columns', after: '14 columns', sentence: '1 run with 14 snapshots.' }, { step: 'order', before: '14 columns', after: '12 columns', sentence: '2 repeated stamps dropped.' }],
    builtAt: '2026-01-02T03:04:05.000Z',
  },
  recipe: { pennyweight: 1, steps: [{ step: 'select', archives: ['00000000-0000-4000-8000-000000000001'], fields: ['u', 'p'] }] },
  builtBy: { id: 'ada', name: 'Ada' }, approvedBy: { id: 'grace', name: 'Grace' }, approvedAt: '2026-01-03T10:00:00.000Z',
  licence: 'CC-BY-4.0', handlingLabel: 'internal', contact: 'wakes@example.org', note: 'Good spacing.',
  sources: [{ archive: '00000000-0000-4000-8000-000000000001', run: 're-100', name: 're100.h5', files: [{ name: 're100.h5', sha256: sha('d'), bytes: 4096 }], handedInBy: { id: 'mary', name: 'Mary' }, handedInAt: '2026-01-01T00:00:00.000Z' }],
  waivers: [{ check: 'time/gap', message: 'There is a gap.', reason: 'The pump was changed.', by: { id: 'grace', name: 'Grace' }, at: '2026-01-02T00:00:00.000Z' }],
  program: '0.1.0',
};
