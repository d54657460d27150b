/** The texts of a bag by RFC 8493 (BagIt 1.0). */

export interface BagFile {
  /** path below the bag, with '/' */
  path: string;
  sha256: string;
  bytes: number;
}

/** RFC 8493, 2.1.1: the bag declaration MUST be these two lines, UTF-8 without a byte-order mark. */
export const bagDeclaration = 'BagIt-Version: 1.0\nTag-File-Character-Encoding: UTF-8\n';

/** RFC 8493, 2.1.3: "checksum filepath"; CR, LF and % in a path MUST be percent-encoded. */
export function manifest(files: BagFile[]): string {
  const encoded = (path: string) => path.replace(/%/g, '%25').replace(/\r/g, '%0D').replace(/\n/g, '%0A');
  return [...files].sort((a, b) => (a.path < b.path ? -1 : 1)).map((file) => `${file.sha256}  ${encoded(file.path)}\n`).join('');
}

/** RFC 8493, 2.2.2: reserved metadata elements; values must hold no line breaks. */
export function bagInfo(elements: [string, string][]): string {
  return elements.map(([key, value]) => `${key}: ${value.replace(/\s*[\r\n]+\s*/g, ' ').trim()}\n`).join('');
}

/** RFC 8493, 2.2.2: Payload-Oxum is "octets.streams". */
export function payloadOxum(payload: BagFile[]): string {
  return `${payload.reduce((sum, file) => sum + file.bytes, 0)}.${payload.length}`;
}
