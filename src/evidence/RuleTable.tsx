/** Time rules judged on a record: admissible or refused and why, degree, sign, effective share; one can be chosen. */
import type { TimeRuleResult } from '#contract/weights.ts';
import { percentText, quantityText } from '../components/number-format.ts';
import { Button } from '../components/Button.tsx';

interface Props {
  rules: TimeRuleResult[];
  /** the rule shown or used */
  chosen: string | null;
  /** the rule that the product suggests */
  suggested?: string | null;
  onChoose?: (rule: string) => void;
  /** word on the button */
  action?: string;
}

export function RuleTable({ rules, chosen, suggested, onChoose, action = 'Show' }: Props) {
  return (
    <div className="overflow-x-auto" tabIndex={0} role="region" aria-label="Time rules">
      <table className="w-full min-w-[52rem] text-sm">
        <thead className="border-b border-rule-strong">
          <tr className="text-left [&>th]:py-2 [&>th]:pr-4 [&>th]:font-medium">
            <th>Rule</th><th>Verdict</th><th className="text-right">Exact to degree</th><th className="text-right">Negative</th><th className="text-right">Smallest</th><th className="text-right">Largest</th>
            <th className="text-right">Effective</th><th className="text-right">Energy error</th>{onChoose && <th><span className="sr-only">Choose</span></th>}
          </tr>
        </thead>
        <tbody className="divide-y divide-rule">
          {rules.map((rule) => (
            <tr key={rule.id} className={`align-top [&>td]:py-2 [&>td]:pr-4 ${rule.id === chosen ? 'bg-brass-wash' : ''}`} aria-current={rule.id === chosen ? 'true' : undefined}>
              <td><code className="font-mono">{rule.id}</code>{rule.id === suggested && <span className="ml-2 text-xs text-brass-deep">suggested</span>}</td>
              <td className="max-w-md"><span className={rule.admissible ? 'text-verdigris' : 'text-oxide'}>{rule.admissible ? 'admissible' : 'refused'}</span> <span className="text-ink-soft">{rule.why}</span></td>
              <Cell>{rule.degree ?? '-'}</Cell>
              <Cell>{rule.negative}</Cell>
              <Cell>{quantityText(rule.min)}</Cell>
              <Cell>{quantityText(rule.max)}</Cell>
              <Cell>{percentText(rule.effective)}</Cell>
              <Cell>{rule.energy_error === null ? '-' : quantityText(rule.energy_error)}</Cell>
              {onChoose && <td>{rule.weights.length > 0 && rule.id !== chosen && <Button kind="quiet" aria-label={`${action} ${rule.id}`} onPress={() => onChoose(rule.id)}>{action}</Button>}</td>}
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Cell({ children }: { children: React.ReactNode }) {
  return <td className="text-right tabular-nums">{children}</td>;
}
