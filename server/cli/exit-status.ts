/** Exit status of every command: 0 to 2 by the worst finding; 64 and 70 are EX_USAGE and EX_SOFTWARE of BSD's sysexits.h. */
import type { Severity } from '#contract/finding.ts';

export const exitStatus = { sound: 0, caution: 1, blocker: 2, usage: 64, internal: 70 } as const;
export type ExitStatus = (typeof exitStatus)[keyof typeof exitStatus];

export function statusOfFindings(findings: { severity: Severity }[]): ExitStatus {
  if (findings.some((finding) => finding.severity === 'blocker')) return exitStatus.blocker;
  return findings.some((finding) => finding.severity === 'caution') ? exitStatus.caution : exitStatus.sound;
}
