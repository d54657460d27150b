/** The check catalogue with its sources; thresholds that this campaign can set otherwise. */
import type { CheckPolicy } from '#contract/finding.ts';
import { routes } from '#contract/routes.ts';
import { useRoute } from '../../api/route-query.ts';
import { ErrorPanel } from '../../components/ErrorPanel.tsx';
import { NumberField } from '../../components/NumberField.tsx';
import { withValue } from '../../evidence/with-value.ts';
import { SeverityMark } from '../../components/SeverityMark.tsx';
import type { Severity } from '#contract/finding.ts';

export function Thresholds({ policy, onChange, disabled }: { policy: CheckPolicy; onChange: (policy: CheckPolicy) => void; disabled: boolean }) {
  const checks = useRoute(routes.listChecks, {}, undefined, { staleTime: Infinity });
  const set = (check: string, name: string, value: number | null) => {
    onChange({ thresholds: { ...policy.thresholds, [check]: withValue(policy.thresholds[check] ?? {}, name, value) } });
  };
  return (
    <section aria-labelledby="thresholds-title" className="space-y-4">
      <h2 id="thresholds-title" className="text-xl">Checks and thresholds</h2>
      <p className="max-w-prose text-ink-soft">An empty threshold uses the default. A changed threshold counts from the next check of an archive.</p>
      <ErrorPanel error={checks.error} />
      <ul className="divide-y divide-rule border-y border-rule">
        {checks.data?.checks.map((check) => (
          <li key={check.id} className="grid gap-x-6 gap-y-2 py-3 lg:grid-cols-[20rem_1fr]">
            <div>
              <p className="flex items-center gap-2"><SeverityMark severity={check.severity as Severity} /><code className="font-mono text-sm">{check.id}</code></p>
              <p className="text-sm">{check.title}</p>
              <p className="text-xs text-ink-soft">Source: {check.source}</p>
            </div>
            <div className="flex flex-wrap gap-4">
              {check.thresholds.map((threshold) => (
                <div key={threshold.name} className="w-64">
                  <NumberField label={`${threshold.meaning}`} unit={threshold.unit || null} placeholder={String(threshold.default)} value={policy.thresholds[check.id]?.[threshold.name] ?? null} onChange={(value) => set(check.id, threshold.name, value)} isDisabled={disabled} />
                </div>
              ))}
            </div>
          </li>
        ))}
      </ul>
    </section>
  );
}
