/** The record's beam under a chosen time rule, every rule judged on its stamps, and the norms of the fields over time. */
import { lazy, Suspense, useState } from 'react';
import { useOutletContext } from 'react-router-dom';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { EmptyState } from '../../components/EmptyState.tsx';
import { Skeleton } from '../../components/Skeleton.tsx';
import { RecordBeam } from '../../evidence/RecordBeam.tsx';
import { RuleTable } from '../../evidence/RuleTable.tsx';
import type { ArchiveOutlet } from './ArchivePage.tsx';

const LineTrace = lazy(() => import('../../plots/LineTrace.tsx'));

export function ArchiveRecord() {
  const { archive } = useOutletContext<ArchiveOutlet>();
  const params = { archive: archive.id };
  const [rule, setRule] = useState<string | null>(null);
  const ready = { enabled: archive.state === 'checked' };
  const weights = useRoute(routes.getArchiveWeights, params, undefined, ready);
  const beam = useRoute(routes.getArchiveBeam, params, {}, ready);
  const statistics = useRoute(routes.getArchiveStatistics, params, undefined, ready);
  if (archive.state !== 'checked') return <EmptyState title="No record yet.">The record appears when the archive has been read.</EmptyState>;
  const error = weights.error ?? beam.error ?? statistics.error;
  if (error) return <ErrorPanel error={error} />;
  if (!weights.data || !beam.data) return <Skeleton lines={10} label="Loading the record" />;
  const shown = rule ?? weights.data.chosen;
  const chosen = weights.data.rules.find((each) => each.id === shown);
  const equal = weights.data.rules.find((each) => each.id === 'equal');
  return (
    <div className="space-y-8">
      <RecordBeam
        label={`Record of ${archive.name}`}
        beam={{ ...beam.data, weights: chosen && chosen.weights.length > 0 ? chosen.weights : beam.data.weights, rule: shown }}
        second={equal && shown !== 'equal' && equal.weights.length > 0 ? { label: 'equal', weights: equal.weights } : undefined}
      />
      <section aria-labelledby="rules-title" className="space-y-3">
        <h2 id="rules-title" className="text-xl">Time rules on these stamps</h2>
        <p className="max-w-prose text-ink-soft">{weights.data.reason}</p>
        <RuleTable rules={weights.data.rules} chosen={shown} suggested={weights.data.chosen} onChoose={setRule} />
      </section>
      <section aria-labelledby="norms-title" className="space-y-3">
        <h2 id="norms-title" className="text-xl">Norm of each snapshot</h2>
        {statistics.data?.fields.map((field) => (
          <Suspense key={field.path} fallback={<Skeleton lines={4} label="Loading the plot" />}>
            <LineTrace label={field.name} unit={field.unit} x={beam.data.stamps} xUnit={beam.data.unit} y={field.norm} />
          </Suspense>
        ))}
      </section>
    </div>
  );
}
