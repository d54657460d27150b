/** The judgement of the time rules, the space rule and the spectrum as text for a person. */
import type { SpectrumResult, WeightsReport } from '#contract/weights.ts';

const number = (value: number) => String(Number(value.toPrecision(4)));

function spectrumLines(spectrum: SpectrumResult, shown: number): string[] {
  const resolved = spectrum.singular_values.slice(0, Math.min(shown, spectrum.resolved));
  const ranks = Object.entries(spectrum.rank).map(([level, rank]) => `${number(100 * Number(level))} % by ${rank}`);
  return [
    `spectrum  ${spectrum.resolved} of ${spectrum.singular_values.length} singular values above the floor of ${number(spectrum.floor)}`,
    `          energy: ${ranks.join(', ')}`,
    `          ${resolved.map(number).join('  ')}${spectrum.singular_values.length > resolved.length ? '  …' : ''}`,
  ];
}

export function weightsText(name: string, { time, space, spectrum }: WeightsReport, shown: number): string {
  const rows = time.rules.map((rule) =>
    [
      rule.id === time.chosen ? '*' : ' ',
      rule.id.padEnd(16),
      rule.admissible ? 'yes' : 'no ',
      String(rule.degree ?? '-').padStart(6),
      number(rule.min).padStart(11),
      number(rule.max).padStart(11),
      `${(100 * rule.effective).toFixed(0)} %`.padStart(9),
      (rule.energy_error === null ? '-' : rule.energy_error.toExponential(1)).padStart(12),
    ].join(' '),
  );
  return [
    name,
    `time      ${time.chosen}: ${time.reason}`,
    `          ${'rule'.padEnd(16)} use degree         min         max effective energy error`,
    ...rows.map((row) => `        ${row}`),
    ...time.rules.filter((rule) => !rule.admissible).map((rule) => `          ${rule.id}: ${rule.why}`),
    `space     ${space.chosen}: ${space.why} Sum ${number(space.sum)}${space.measure === null ? '' : `, measure ${number(space.measure)}`}.`,
    ...(spectrum ? spectrumLines(spectrum, shown) : ['spectrum  none']),
  ].join('\n');
}
