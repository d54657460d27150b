/** What exactly differs between a reading and an archive, and a saved reading brought to the next archive. */
import { describe, expect, it } from 'vitest';
import type { ArchiveContents, Reading } from '#contract/reading.ts';
import { mismatchesOf } from '../../../server/reading/fit.ts';
import { adapt } from '../../../server/reading/proposal/adapt.ts';
import { propose } from '../../../server/reading/proposal/propose.ts';
import { array, contentsOf, evidenceFor } from './made-contents.ts';

const base = (nt = 5, nx = 8) => [array('/u', [nt, 6, nx]), array('/t', [nt]), array('/x', [nx]), array('/y', [6]), array('/w', [6 * nx]), array('/nu', [])];
const contents = contentsOf(base());
const reading = propose(contents, evidenceFor(contents));

function differing(change: (reading: Reading) => Partial<Reading>, archive: ArchiveContents = contents) {
  return mismatchesOf(archive, { ...reading, ...change(reading) });
}

const field = reading.fields[0];

describe('a reading', () => {
  it('that was proposed fits', () => {
    expect(mismatchesOf(contents, reading)).toEqual([]);
  });

  it.each<[string, (one: Reading) => Partial<Reading>, string, RegExp]>([
    ['a field that is not there', () => ({ fields: [{ ...field, path: '/v' }] }), '/v', /read as a field, is not in the archive/],
    ['too few axes', () => ({ fields: [{ ...field, axes: ['time', 'node'] }] }), '/u', /has shape \(5, 6, 8\), and the reading names 2 axes/],
    ['an axis twice', () => ({ fields: [{ ...field, axes: ['time', 'x', 'x'] }] }), '/u', /has the axis x twice/],
    ['axes exchanged', () => ({ fields: [{ ...field, axes: ['time', 'x', 'y'] }] }), '/u', /has 6 values along x, and \/x gives 8/],
    ['a time vector of another length', () => ({ time: { kind: 'array', path: '/x', unit: null } }), '/x', /read as time, has shape \(8\), and \/u needs 5 values/],
    ['coordinates of another length', ({ axes }) => ({ axes: axes.map((axis) => (axis.name === 'x' ? { ...axis, path: '/y' } : axis)) }), '/y', /needs 8 values/],
    ['edges of the wrong length', ({ axes }) => ({ axes: axes.map((axis) => (axis.name === 'x' ? { ...axis, edges: '/x' } : axis)) }), '/x', /cell edges along x.* needs 9 values/],
    ['weights of another number', () => ({ spaceWeights: { path: '/x' } }), '/x', /the grid needs 48 values/],
    ['time weights of another number', () => ({ timeWeights: { path: '/x' } }), '/x', /the record needs 5 values/],
    ['no field', () => ({ fields: [] }), '/', /names no field/],
    ['steps where there are none', () => ({ fields: [{ ...field, path: '/{step}/u', axes: ['y', 'x'] }] }), '/{step}/u', /No group of the archive fits/],
    ['a step source without steps', () => ({ time: { kind: 'step-name', unit: null } }), '/', /no field has a path with \{step\}/],
  ])('with %s does not fit, and says where', (_, change, path, message) => {
    expect(differing(change)).toContainEqual(expect.objectContaining({ path, message: expect.stringMatching(message) }));
  });

  it('with fields of different lengths names both', () => {
    const archive = contentsOf([...base(), array('/v', [4, 6, 8])]);
    const [mismatch] = differing(({ fields }) => ({ fields: [...fields, { ...field, path: '/v', name: 'v' }] }), archive);
    expect(mismatch).toEqual({ path: '/v', expected: '5 snapshots', actual: '4 snapshots', message: '/v has 4 snapshots, and /u has 5.' });
  });

  it.each([
    ['complex128', /real and imaginary parts/],
    ['string', /it holds text/],
    ['other', /no plain numbers/],
  ] as const)('with a field of %s does not fit', (dtype, message) => {
    const archive = contentsOf(base().map((one) => (one.path === '/u' ? { ...one, dtype } : one)));
    expect(mismatchesOf(archive, reading)).toContainEqual(expect.objectContaining({ path: '/u', message: expect.stringMatching(message) }));
  });

  it('with steps of different shapes names the first that differs', () => {
    const archive = contentsOf([array('/s1/u', [6, 8]), array('/s2/u', [6, 8]), array('/s3/u', [6, 9])]);
    const steps: Reading = { ...reading, layout: 'group-per-step', time: { kind: 'step-name', unit: null }, axes: [], spaceWeights: null, fields: [{ ...field, path: '/{step}/u', axes: ['y', 'x'] }] };
    expect(mismatchesOf(archive, steps)).toMatchObject([{ path: '/s3/u', expected: 'float64 (6, 8)', actual: 'float64 (6, 9)' }]);
  });
});

describe('a saved reading', () => {
  it('fits the next archive of another length and resolution, with its parameters', () => {
    const next = contentsOf([...base(9, 16), array('/extra', [3])]);
    const adapted = adapt(next, reading, evidenceFor(next, { '/nu': [0.25] }));
    expect(mismatchesOf(next, adapted)).toEqual([]);
    expect(adapted.axes.map(({ name, count }) => [name, count])).toEqual([['y', 6], ['x', 16]]);
    expect(adapted.parameters).toMatchObject([{ name: 'nu', value: 0.25 }]);
    expect(adapted.roles.find(({ path }) => path === '/extra')).toMatchObject({ role: 'ignored', why: 'the saved reading does not know it' });
  });

  it('says which array differs when the next archive does not fit', () => {
    const next = contentsOf(base().map((one) => (one.path === '/t' ? array('/t', [4]) : one)));
    expect(mismatchesOf(next, adapt(next, reading, evidenceFor(next)))).toMatchObject([{ path: '/t', expected: '5 values', actual: '(4)' }]);
    const without = contentsOf(base().filter(({ path }) => path !== '/y'));
    expect(mismatchesOf(without, adapt(without, reading, evidenceFor(without)))).toMatchObject([{ path: '/y', actual: 'nothing' }]);
  });
});
