/** Text from outside, made fit for PostgreSQL: it stores neither the character NUL nor half of a surrogate pair (manual, 8.14). */
export function storable<T>(value: T): T {
  if (typeof value === 'string') return value.replace(/[\0\p{Surrogate}]/gu, '\ufffd') as T;
  if (Array.isArray(value)) return value.map(storable) as T;
  if (value === null || typeof value !== 'object') return value;
  return Object.fromEntries(Object.entries(value).map(([key, each]) => [storable(key), storable(each)])) as T;
}
