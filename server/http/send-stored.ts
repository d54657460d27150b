/** Sends a stored file with Range, ETag and resume: Express' own sendFile does the protocol, the SHA-256 is the ETag. */
import type { Response } from 'express';

export interface StoredFile {
  path: string;
  name: string;
  sha256: string;
  type?: string;
}

export async function sendStored(res: Response, file: StoredFile): Promise<void> {
  res.setHeader('etag', `"${file.sha256}"`);
  res.setHeader('content-type', file.type ?? 'application/octet-stream');
  res.attachment(file.name);
  if (file.type) res.setHeader('content-type', file.type);
  await new Promise<void>((resolve, reject) => {
    res.sendFile(file.path, { etag: false, lastModified: false, cacheControl: false, dotfiles: 'allow', acceptRanges: true }, (error?: Error & { code?: string }) => {
      // The receiver going away in mid-transfer is their right, not an error of ours.
      if (error && error.code !== 'ECONNABORTED' && error.code !== 'EPIPE' && !res.headersSent) reject(error);
      else resolve();
    });
  });
}
