/** Sends a stored file with Range, ETag and resume: Express' own sendFile does the protocol, the SHA-256 is the ETag. */
import type { Response } from 'express';
import { PennyweightError } from '#contract/error.ts';

export interface StoredFile {
  path: string;
  name: string;
  sha256: string;
  type?: string;
}

type SendFailure = Error & { code?: string; status?: number };

export async function sendStored(res: Response, file: StoredFile): Promise<void> {
  res.setHeader('etag', `"${file.sha256}"`);
  res.setHeader('content-type', file.type ?? 'application/octet-stream');
  res.attachment(file.name);
  if (file.type) res.setHeader('content-type', file.type);
  const failure = await new Promise<SendFailure | null>((resolve) => {
    res.sendFile(file.path, { etag: false, lastModified: false, cacheControl: false, dotfiles: 'allow', acceptRanges: true }, (error?: SendFailure) => resolve(error ?? null));
  });
  // The receiver going away in mid-transfer is their right, not an error of ours.
  if (!failure || failure.code === 'ECONNABORTED' || failure.code === 'EPIPE' || res.headersSent) return;
  for (const header of ['etag', 'content-disposition', 'content-type', 'accept-ranges']) res.removeHeader(header);
  if (failure.status !== 416) throw failure;
  // RFC 9110, 15.5.17: a 416 SHOULD tell the current length; Express has set it.
  const bytes = Number(/\d+$/.exec(String(res.getHeader('content-range')))?.[0]);
  throw new PennyweightError('range-invalid', `${file.name} has ${bytes} bytes: ask for a range that begins before its end.`, { bytes });
}
