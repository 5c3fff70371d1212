import { fireEvent, render, screen } from '@testing-library/react';
import { afterEach, expect, it, vi } from 'vitest';
import { DataTable } from '../../src/components/data-table.tsx';

/** A box of this width with content of that width, as a browser would measure them. */
const measures = (boxPx: number, contentPx: number): void => {
  vi.spyOn(HTMLElement.prototype, 'clientWidth', 'get').mockReturnValue(boxPx);
  vi.spyOn(HTMLElement.prototype, 'scrollWidth', 'get').mockReturnValue(contentPx);
};
const renderTable = () =>
  render(
    <DataTable
      caption="Ports"
      columns={[{ key: 'name', head: 'Name', cell: (row: string) => row, sortBy: (row: string) => row }]}
      rows={['wan1', 'lan1']}
      rowKey={(row) => row}
    />,
  );
afterEach(() => vi.restoreAllMocks());

it('a table that is wider than its box shows that there is more, until it is scrolled to its end', () => {
  measures(300, 500);
  renderTable();
  expect(screen.getByTitle('Further columns')).toBeVisible();
  const box = screen.getByRole('table').parentElement!;
  box.scrollLeft = 200;
  fireEvent.scroll(box);
  expect(screen.queryByTitle('Further columns')).toBeNull();
});

it('a table that fits has no such edge', () => {
  measures(500, 500);
  renderTable();
  expect(screen.queryByTitle('Further columns')).toBeNull();
});
