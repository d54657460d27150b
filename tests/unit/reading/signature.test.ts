import { describe, expect, it } from 'vitest';
import { hdf5Signature, signatureOf } from '../../../server/reading/signature.ts';
import { folderForTests, npy } from './bytes-on-disk.ts';

const folder = folderForTests();
const at = (position: number) => Buffer.concat([Buffer.alloc(position, 'x'), hdf5Signature, Buffer.alloc(100)]);

describe('the format of a file', () => {
  it.each([0, 512, 1024, 2048, 8192])('is HDF5 with the signature at byte %i', (position) => {
    expect(signatureOf(folder.open('run.npy', at(position)))).toEqual({ format: 'hdf5', offset: position });
  });

  it.each([1, 100, 511, 1536, 3072])('is not HDF5 with the signature at byte %i, where none may stand', (position) => {
    expect(() => signatureOf(folder.open('run.h5', at(position)))).toThrow(/is/);
  });

  it('is NPY by its magic, whatever the name', () => {
    expect(signatureOf(folder.open('run.h5', npy('{}')))).toEqual({ format: 'npy' });
  });

  it.each([
    ['t,u\n0,1\n', /is text/],
    ['größer\n', /is text/],
    [Uint8Array.of(0x50, 0x4b, 3, 4, 0, 0), /is a ZIP or NPZ container/],
    ['CDF\x01', /is a classic netCDF file; convert it to netCDF-4/],
    [Uint8Array.of(0x1f, 0x8b, 8), /is compressed by gzip; unpack it first/],
    [Uint8Array.of(0x80, 4, 0x95, 0), /is a pickled Python object, which is never loaded/],
    [Uint8Array.of(0x80, 9, 0xff, 0), /is of no known format \(it begins with the bytes 80 09 ff 00\)/],
    ['MATLAB 5.0 MAT-file', /is a MATLAB 5 file; save it as version 7\.3/],
  ])('names what %j is', (bytes, sentence) => {
    expect(() => signatureOf(folder.open('run.h5', bytes))).toThrow(expect.objectContaining({ code: 'unsupported-format', message: expect.stringMatching(sentence) }));
  });

  it('refuses an empty file', () => {
    expect(() => signatureOf(folder.open('run.h5', ''))).toThrow(expect.objectContaining({ code: 'file-unreadable' }));
  });
});
