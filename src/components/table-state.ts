/** Order and filter of a table, kept in the address so that a view can be shared and survives a reload. */
import { useSearchParams } from 'react-router-dom';

export interface TableState {
  /** column and direction, or null for the order as given */
  sort: { id: string; desc: boolean } | null;
  find: string;
}

/** `sort=name`, `sort=-name` */
export function readTableState(search: URLSearchParams, key: string): TableState {
  const sort = search.get(`${key}sort`) ?? '';
  return { sort: sort === '' ? null : { id: sort.replace(/^-/, ''), desc: sort.startsWith('-') }, find: search.get(`${key}find`) ?? '' };
}

export function useTableState(key: string): [TableState, (change: Partial<TableState>) => void] {
  const [search, setSearch] = useSearchParams();
  const state = readTableState(search, key);
  const change = (next: Partial<TableState>) => {
    setSearch((now) => {
      const merged = { ...readTableState(now, key), ...next };
      const after = new URLSearchParams(now);
      const put = (name: string, value: string) => (value === '' ? after.delete(name) : after.set(name, value));
      put(`${key}sort`, merged.sort ? `${merged.sort.desc ? '-' : ''}${merged.sort.id}` : '');
      put(`${key}find`, merged.find);
      return after;
    }, { replace: true, preventScrollReset: true });
  };
  return [state, change];
}
