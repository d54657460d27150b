import { describe, expect, it } from 'vitest';
import { fileChecksumMismatch } from '../../../../server/engine/checks/file-checksum-mismatch.ts';
import { judge, makeSubject } from './survey-factory.ts';

const received = 'ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad';
const other = 'e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855';

describe('file/checksum-mismatch', () => {
  it('fires when the digests differ, and shows both', () => {
    const [found] = judge(fileChecksumMismatch, makeSubject(null, { checksum: { received, announced: other } }));
    expect(found.evidence).toEqual({ received, announced: other });
    expect(found.message).toContain('ba7816bf8f01');
  });

  it.each([
    ['the same digest', { received, announced: received }],
    ['the same digest in capitals with a line end', { received, announced: `${received.toUpperCase()}\n` }],
    ['no announced digest', { received, announced: null }],
    ['nothing known', null],
  ])('is silent for %s', (_name, checksum) => {
    expect(judge(fileChecksumMismatch, makeSubject({}, { checksum }))).toEqual([]);
  });
});
