/** A record of numbers with one of them set, or taken out when it is null. */
export function withValue(values: Record<string, number>, name: string, value: number | null): Record<string, number> {
  const next = { ...values };
  if (value === null) delete next[name];
  else next[name] = value;
  return next;
}
