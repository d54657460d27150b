import { describe, expect, it } from 'vitest';
import { bagDeclaration, bagInfo, manifest, payloadOxum } from '../../../../server/engine/release/bag.ts';

const file = (path: string, bytes = 10) => ({ path, bytes, sha256: 'a'.repeat(64) });

describe('the texts of a bag (RFC 8493)', () => {
  it('declare version and encoding in two lines', () => {
    expect(bagDeclaration).toBe('BagIt-Version: 1.0\nTag-File-Character-Encoding: UTF-8\n');
  });

  it('list every file once, sorted, with its checksum', () => {
    expect(manifest([file('data/b'), file('data/a')])).toBe(`${'a'.repeat(64)}  data/a\n${'a'.repeat(64)}  data/b\n`);
  });

  it('percent-encode what would break a line of the manifest', () => {
    expect(manifest([file('data/50%\nnew')])).toBe(`${'a'.repeat(64)}  data/50%25%0Anew\n`);
  });

  it('count the payload as octets.streams', () => {
    expect(payloadOxum([file('data/a', 7), file('data/b', 35)])).toBe('42.2');
  });

  it('keep metadata on one line each, whatever a person typed', () => {
    expect(bagInfo([['External-Description', 'first\r\n  Injected: yes\n']])).toBe('External-Description: first Injected: yes\n');
  });
});
