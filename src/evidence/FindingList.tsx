/** Findings with their evidence, remedy and waiver; the same list on archive, draft and review pages. */
import { useState } from 'react';
import { Button } from '../components/Button.tsx';
import { EmptyState } from '../components/EmptyState.tsx';
import { SegmentedControl } from '../components/SegmentedControl.tsx';
import { FindingEntry } from './FindingEntry.tsx';
import { filterFindings, isOpen, type FindingView, type ShownFinding } from './finding-filter.ts';

export interface FindingActions {
  /** shown when the person may waive cautions */
  onWaive?: (finding: ShownFinding) => void;
  onRevoke?: (finding: ShownFinding) => void;
  /** puts the remedy into a recipe */
  onRemedy?: (finding: ShownFinding) => void;
  /** shows the place on the beam */
  onPlace?: (finding: ShownFinding) => void;
}

export function FindingList({ findings, ...actions }: { findings: ShownFinding[] } & FindingActions) {
  const [view, setView] = useState<FindingView>(() => (findings.some(isOpen) ? 'open' : 'all'));
  const shown = filterFindings(findings, view);
  const count = (which: FindingView) => filterFindings(findings, which).length;
  const views: { id: FindingView; label: string }[] = [
    { id: 'open', label: `Open ${count('open')}` },
    { id: 'blocker', label: `Blockers ${count('blocker')}` },
    { id: 'caution', label: `Cautions ${count('caution')}` },
    { id: 'note', label: `Notes ${count('note')}` },
    { id: 'all', label: `All ${findings.length}` },
  ];
  return (
    <section aria-label="Findings" className="space-y-4">
      <SegmentedControl label="Show findings" value={view} onChange={setView} options={views} />
      {shown.length === 0 ? (
        <EmptyState title={view === 'open' ? 'Nothing is open.' : 'No finding of this kind.'}>
          {findings.length > 0 && view !== 'all' ? <Button kind="quiet" onPress={() => setView('all')}>Show all {findings.length}</Button> : 'The checks found nothing to report.'}
        </EmptyState>
      ) : (
        <ol className="divide-y divide-rule border-y border-rule">
          {shown.map((finding) => (
            <FindingEntry key={finding.findingId} finding={finding} {...actions} />
          ))}
        </ol>
      )}
    </section>
  );
}
