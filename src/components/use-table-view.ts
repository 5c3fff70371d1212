import { useMemo } from 'react';
import { useSearchValues } from '../lib/use-search-values.ts';
import type { TableView } from './table-view.ts';

/** A table's view, kept in the address under a name, so that what is seen can be sent to a colleague. */
export function useTableView(name: string): readonly [TableView, (view: TableView) => void] {
  const { valueOf, change } = useSearchValues();
  const [filter, sort, columns] = [`${name}-filter`, `${name}-sort`, `${name}-columns`];
  const [filterText, sortText, columnText] = [valueOf(filter), valueOf(sort), valueOf(columns)];
  const view = useMemo<TableView>(
    () => ({
      filter: filterText,
      sorting:
        sortText === ''
          ? undefined
          : { key: sortText.replace(/^-/, ''), descending: sortText.startsWith('-') },
      columns: columnText === '' ? undefined : columnText.split(','),
    }),
    [filterText, sortText, columnText],
  );
  return [
    view,
    ({ filter: text, sorting, columns: keys }) =>
      change({
        [filter]: text,
        [sort]: sorting === undefined ? '' : `${sorting.descending ? '-' : ''}${sorting.key}`,
        [columns]: keys?.join(',') ?? '',
      }),
  ];
}
