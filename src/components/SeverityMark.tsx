/** The severity of a finding: shape and word. */
import type { Severity } from '#contract/finding.ts';
import { MarkShape, markColour } from './MarkShape.tsx';

export function SeverityMark({ severity }: { severity: Severity }) {
  return (
    <span className={`inline-flex items-center gap-1.5 text-sm font-medium ${markColour[severity]}`}>
      <MarkShape kind={severity} /> {severity}
    </span>
  );
}
