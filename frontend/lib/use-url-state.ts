import { useSearchParams } from 'react-router-dom';

/**
 * One value kept in the address (filters, sort order, the chosen row), so that the page can be sent to a
 * colleague. An empty value leaves the address.
 */
export function useUrlState(name: string, fallback = ''): [string, (value: string) => void] {
  const [params, setParams] = useSearchParams();
  const set = (value: string) =>
    setParams(
      (previous) => {
        const next = new URLSearchParams(previous);
        if (value === fallback || value === '') next.delete(name);
        else next.set(name, value);
        return next;
      },
      { replace: true },
    );
  return [params.get(name) ?? fallback, set];
}

export interface Sort {
  key: string;
  descending: boolean;
}

/** The sort order in the address: `?sort=age` or `?sort=-age`. */
export function useUrlSort(name = 'sort', fallback = ''): [Sort | undefined, (key: string) => void] {
  const [value, set] = useUrlState(name, fallback);
  const sort = value === '' ? undefined : { key: value.replace(/^-/, ''), descending: value.startsWith('-') };
  const turn = (key: string) => set(sort?.key === key && !sort.descending ? `-${key}` : key);
  return [sort, turn];
}
