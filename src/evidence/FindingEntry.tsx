/** One finding: what was found, where, what to do, and what was decided. */
import { Link } from '../components/Link.tsx';
import { Button } from '../components/Button.tsx';
import { SeverityMark } from '../components/SeverityMark.tsx';
import { TimeStamp } from '../components/TimeStamp.tsx';
import { EvidenceTable } from './EvidenceTable.tsx';
import type { FindingActions } from './FindingList.tsx';
import type { ShownFinding } from './finding-filter.ts';

export function FindingEntry({ finding, onWaive, onRevoke, onRemedy, onPlace }: { finding: ShownFinding } & FindingActions) {
  const waivable = finding.severity === 'caution' && finding.state === 'open' && !finding.settledBy;
  return (
    <li id={`finding-${finding.findingId}`} className="grid gap-x-6 gap-y-2 py-4 sm:grid-cols-[8.5rem_1fr]">
      <div className="flex items-start gap-2 sm:block sm:space-y-1">
        <SeverityMark severity={finding.severity} />
        <code className="block font-mono text-xs text-ink-soft">{finding.id}</code>
      </div>
      <div className="min-w-0 space-y-2">
        <p className="text-pretty">{finding.message}</p>
        {finding.archive && finding.archiveName && (
          <p className="text-sm text-ink-soft">
            In <Link to={`/archives/${finding.archive}`}>{finding.archiveName}</Link>
          </p>
        )}
        {finding.settledBy && <p className="text-sm text-verdigris">Settled by the recipe: {finding.settledBy}</p>}
        {finding.waiver && (
          <p className="border-l-2 border-brass pl-3 text-sm">
            Waived by {finding.waiver.by.name}, <TimeStamp at={finding.waiver.at} />: {finding.waiver.reason}
          </p>
        )}
        {finding.remedy && !finding.settledBy && <p className="text-sm text-ink-soft">Remedy: {finding.remedy.sentence}</p>}
        <EvidenceTable finding={finding} />
        <div className="flex flex-wrap gap-2">
          {onPlace && (finding.evidence.indices?.length ?? 0) > 0 && <Button kind="quiet" onPress={() => onPlace(finding)}>Show on the beam</Button>}
          {onRemedy && finding.remedy && !finding.settledBy && <Button kind="plain" onPress={() => onRemedy(finding)}>Put the remedy into the recipe</Button>}
          {onWaive && waivable && <Button kind="plain" onPress={() => onWaive(finding)}>Waive with a reason</Button>}
          {onRevoke && finding.state === 'waived' && <Button kind="quiet" onPress={() => onRevoke(finding)}>Take the waiver back</Button>}
        </div>
      </div>
    </li>
  );
}
