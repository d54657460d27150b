/** Findings as a page shows them: filtered by severity and state, grouped by what they speak of. */
import type { Severity } from '#contract/finding.ts';
import type { StoredFinding } from '#contract/archive.ts';

/** A stored finding; on a draft it also names the archive it comes from and the recipe step that settles it. */
export type ShownFinding = StoredFinding & { archive?: string | null; archiveName?: string | null; settledBy?: string | null };

export type FindingView = 'open' | 'all' | Severity;

/** A finding that still asks for something: not waived, not settled by the recipe, more than a note. */
export function isOpen(finding: ShownFinding): boolean {
  return finding.severity !== 'note' && finding.state === 'open' && !finding.settledBy;
}

export function filterFindings(findings: ShownFinding[], view: FindingView): ShownFinding[] {
  if (view === 'all') return findings;
  return view === 'open' ? findings.filter(isOpen) : findings.filter((finding) => finding.severity === view);
}

/** One sentence that says how things stand, for the head of a page. */
export function verdict(findings: ShownFinding[]): { kind: 'sound' | 'caution' | 'blocker'; sentence: string } {
  const blockers = findings.filter((finding) => finding.severity === 'blocker' && isOpen(finding)).length;
  const cautions = findings.filter((finding) => finding.severity === 'caution' && isOpen(finding)).length;
  const count = (n: number, word: string) => `${n} ${word}${n === 1 ? '' : 's'}`;
  if (blockers > 0) return { kind: 'blocker', sentence: `${count(blockers, 'open blocker')}${cautions ? ` and ${count(cautions, 'open caution')}` : ''}: not fit to release as it stands.` };
  if (cautions > 0) return { kind: 'caution', sentence: `${count(cautions, 'open caution')}: each needs a remedy in the recipe or a reasoned waiver.` };
  return { kind: 'sound', sentence: 'No open blocker or caution.' };
}
