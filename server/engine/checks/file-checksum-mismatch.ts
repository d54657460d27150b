/** file/checksum-mismatch: the received bytes differ from what the sender's SHA-256 says was sent. */
import type { Check } from './check.ts';

export const fileChecksumMismatch: Check = {
  id: 'file/checksum-mismatch',
  severity: 'blocker',
  title: "The received bytes have the sender's SHA-256",
  source: 'FIPS 180-4 (SHA-256); comparison of digests: common practice, no source',
  thresholds: {},
  judge({ checksum }) {
    if (!checksum || checksum.announced === null) return [];
    const announced = checksum.announced.trim().toLowerCase();
    const received = checksum.received.trim().toLowerCase();
    if (announced === received) return [];
    return [
      {
        path: null,
        message: `The received bytes have SHA-256 ${received.slice(0, 12)}…, the sender announced ${announced.slice(0, 12)}…: the file changed on its way or the wrong file was sent; upload it again.`,
        evidence: { received, announced },
        remedy: null,
      },
    ];
  },
};
