/** JSON with its keys in order, so that equal values have equal text wherever they have been (PostgreSQL's jsonb reorders keys). */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, each: unknown) =>
    each !== null && typeof each === 'object' && !Array.isArray(each) ? Object.fromEntries(Object.entries(each).sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0))) : each,
  ) ?? 'null';
}
