/** A refusal of the server: its sentence, what it says of single fields, and the code to quote. Nothing when there is none. */
import type { Problem } from '#contract/error.ts';
import { MarkShape } from './MarkShape.tsx';

const shownDetails = ['file', 'path', 'index', 'time', 'expected', 'actual'];

/** An error that carries the server's problem document. */
export interface Refusal {
  problem: Problem;
}

export function ErrorPanel({ error }: { error: Refusal | null | undefined }) {
  if (!error) return null;
  const { detail, code, issues = [], details = {}, requestId } = error.problem;
  const where = shownDetails.filter((key) => ['string', 'number'].includes(typeof details[key])).map((key) => `${key} ${String(details[key])}`);
  return (
    <div role="alert" className="my-4 grid grid-cols-[auto_1fr] gap-x-3 border-y border-l-4 border-y-rule border-l-oxide bg-paper-raised px-4 py-3">
      <MarkShape kind="blocker" className="mt-1.5" />
      <div className="min-w-0 space-y-1">
        <p className="text-pretty break-words">{detail}</p>
        {issues.length > 0 && (
          <ul className="list-disc pl-5 text-sm">
            {issues.map((issue) => <li key={`${issue.path}${issue.message}`}>{issue.path && <code className="font-mono">{issue.path}: </code>}{issue.message}</li>)}
          </ul>
        )}
        {where.length > 0 && <p className="text-sm break-words text-ink-soft">{where.join(', ')}</p>}
        <p className="text-xs text-ink-soft"><code className="font-mono">{code}{requestId ? ` ${requestId}` : ''}</code></p>
      </div>
    </div>
  );
}
