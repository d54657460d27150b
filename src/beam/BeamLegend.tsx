/** What the signs on this beam mean; only those that occur on it. */
import type { BeamRecord, Weights } from './beam-record.ts';

const hatched = <path d="M0 12L12 0M-4 8L8 -4M4 16L16 4" className="stroke-rule-strong" />;

export function BeamLegend({ record, second }: { record: BeamRecord; second?: Weights }) {
  const { gaps, duplicates, restarts } = record.marks;
  const parts = new Set(record.split ?? []);
  const count = (n: number, one: string, several: string) => `${n} ${n === 1 ? one : several}`;
  const signs: [string, React.ReactNode, boolean][] = [
    [record.rule ? `weight by ${record.rule}` : record.weights ? 'weight' : 'snapshot', <path key="w" d="M3 12V5M9 12V1" className="stroke-ink" strokeWidth="2" />, true],
    ['negative weight', <path key="n" d="M6 0v12" className="stroke-oxide" strokeWidth="2" />, record.weights?.some((weight) => weight < 0) ?? false],
    [`weight by ${second?.label}`, <path key="s" d="M2 6h8" className="stroke-brass" strokeWidth="2" />, second !== undefined],
    [count(gaps.length, 'gap', 'gaps'), <g key="g">{hatched}</g>, gaps.length > 0],
    [count(duplicates.length, 'repeated stamp', 'repeated stamps'), <path key="d" d="M4 12V2h5M8 12V2" className="fill-none stroke-oxide" strokeWidth="1.600" />, duplicates.length > 0],
    [count(restarts.length, 'restart', 'restarts'), <path key="r" d="M10 12V3H3v6M0.500 7L3 11l2.500-4" className="fill-none stroke-amber" strokeWidth="1.500" />, restarts.length > 0],
    ['training', <rect key="t" width="12" height="12" y="0" className="fill-train" />, parts.has('train')],
    ['validation', <rect key="v" width="12" height="5.500" className="fill-validation" />, parts.has('validation')],
    ['test', <rect key="e" width="12" height="5.500" y="6.500" className="fill-test" />, parts.has('test')],
    ['left out between parts', <rect key="l" width="12" height="1.500" y="5" className="fill-rule-strong" />, parts.has('guard')],
  ];
  return (
    <ul aria-label="Signs on the beam" className="flex flex-wrap gap-x-5 gap-y-1 text-sm text-ink-soft">
      {signs.filter(([, , occurs]) => occurs).map(([word, sign]) => (
        <li key={word} className="flex items-center gap-1.5"><svg aria-hidden viewBox="0 0 12 12" className="h-3 w-3 overflow-hidden">{sign}</svg>{word}</li>
      ))}
    </ul>
  );
}
