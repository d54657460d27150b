/** Opens the files of one archive by what their first bytes say. Runs in the reading process only. */
import { PennyweightError } from '#contract/error.ts';
import type { Archive, ArchiveFile } from './archive.ts';
import { openFile } from './file-bytes.ts';
import type { Limits } from './limits.ts';
import { openNpyArchive } from './npy/npy-archive.ts';
import { signatureOf } from './signature.ts';

export async function openArchive(files: ArchiveFile[], limits: Limits): Promise<Archive> {
  if (files.length === 0) throw new PennyweightError('invalid-input', 'an archive needs at least one file.');
  const opened = files.map(({ name, path }) => openFile(path, name));
  const signatures = opened.map(signatureOf);
  const [first] = signatures;
  if (first.format === 'hdf5' && signatures.length === 1) {
    // The library takes half a second to start: only for files that need it.
    const { openHdf5Archive } = await import('./hdf5/hdf5-archive.ts');
    return openHdf5Archive(files[0].path, opened[0], first.offset, limits);
  }
  const stranger = signatures.findIndex(({ format }) => format !== 'npy');
  if (stranger >= 0) {
    throw new PennyweightError(
      'unsupported-format',
      `${files[stranger].name} is one HDF5 file of ${files.length} files, and an archive is one HDF5 file or NPY files; hand each run in on its own.`,
      { file: files[stranger].name },
    );
  }
  return openNpyArchive(opened);
}
