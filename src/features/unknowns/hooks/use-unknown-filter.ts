import { useCallback } from 'react';
import { useSearchParams } from 'react-router-dom';
import { unknownListQuery } from '../../../../shared/schemas/unknowns';
import type { UnknownFilter } from '../api/unknowns';

const DEFAULTS: UnknownFilter = { ...unknownListQuery.parse({}), pageSize: 25 };

/** Reads the filter from an address; whatever cannot be read falls back to its default. */
export function readUnknownFilter(search: URLSearchParams): UnknownFilter {
  const filter = { ...DEFAULTS };
  const shape = unknownListQuery.shape;
  const text = shape.search.safeParse(search.get('search') ?? undefined);
  if (text.success) filter.search = text.data;
  const status = shape.status.safeParse(search.get('status') ?? undefined);
  if (status.success) filter.status = status.data;
  const sort = shape.sort.safeParse(search.get('sort') ?? undefined);
  if (sort.success) filter.sort = sort.data;
  const direction = shape.direction.safeParse(search.get('direction') ?? undefined);
  if (direction.success) filter.direction = direction.data;
  const page = shape.page.safeParse(search.get('page') ?? undefined);
  if (page.success) filter.page = page.data;
  return filter;
}

/** Writes only what differs from the default, so that addresses stay short. */
export function writeUnknownFilter(filter: UnknownFilter): URLSearchParams {
  const search = new URLSearchParams();
  for (const key of ['search', 'status', 'sort', 'direction', 'page'] as const) {
    if (filter[key] !== DEFAULTS[key]) search.set(key, String(filter[key]));
  }
  return search;
}

/** Filter, order and page of the list, kept in the address. Any change but of the page goes back to the first page. */
export function useUnknownFilter(): [UnknownFilter, (change: Partial<UnknownFilter>, options?: { replace: boolean }) => void] {
  const [search, setSearch] = useSearchParams();
  const setFilter = useCallback(
    (change: Partial<UnknownFilter>, options = { replace: false }) => {
      setSearch((current) => writeUnknownFilter({ ...readUnknownFilter(current), page: 1, ...change }), options);
    },
    [setSearch],
  );
  return [readUnknownFilter(search), setFilter];
}
