import { fireEvent, render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, test, vi } from 'vitest';
import { DataTable, type Column } from '../../src/components/data-table.tsx';

interface Row {
  readonly name: string;
  readonly vlan: number;
}
const rows: readonly Row[] = [
  { name: 'seg-10', vlan: 110 },
  { name: 'seg-2', vlan: 9 },
  { name: 'Seg-1', vlan: 110 },
];
const columns: readonly Column<Row>[] = [
  { key: 'name', head: 'Segment', cell: ({ name }) => name, sortBy: ({ name }) => name },
  { key: 'vlan', head: 'VLAN', cell: ({ vlan }) => vlan, sortBy: ({ vlan }) => vlan, align: 'right' },
  { key: 'note', head: 'Note', cell: () => '–' },
];
const names = (): (string | null)[] =>
  screen
    .getAllByRole('row')
    .slice(1)
    .map((row) => within(row).getAllByRole('cell')[0]?.textContent ?? null);

test('a press on a head sorts by it, the next one turns it round; numbers inside names count as numbers', async () => {
  render(<DataTable caption="Segments" columns={columns} rows={rows} rowKey={({ name }) => name} />);
  expect(names()).toEqual(['seg-10', 'seg-2', 'Seg-1']);
  await userEvent.click(screen.getByRole('button', { name: 'Segment' }));
  expect(names()).toEqual(['Seg-1', 'seg-2', 'seg-10']);
  expect(screen.getByRole('columnheader', { name: 'Segment' })).toHaveAttribute('aria-sort', 'ascending');
  await userEvent.click(screen.getByRole('button', { name: 'Segment' }));
  expect(names()).toEqual(['seg-10', 'seg-2', 'Seg-1']);
  expect(screen.getByRole('columnheader', { name: 'Segment' })).toHaveAttribute('aria-sort', 'descending');
});

test('equal rows keep the order they came in', async () => {
  render(<DataTable caption="Segments" columns={columns} rows={rows} rowKey={({ name }) => name} />);
  await userEvent.click(screen.getByRole('button', { name: 'VLAN' }));
  expect(names()).toEqual(['seg-2', 'seg-10', 'Seg-1']);
});

test('a head that cannot sort is no button', () => {
  render(<DataTable caption="Segments" columns={columns} rows={rows} rowKey={({ name }) => name} />);
  expect(screen.queryByRole('button', { name: 'Note' })).not.toBeInTheDocument();
});

test('a row is chosen by mouse and by keyboard, once each', async () => {
  const onSelect = vi.fn();
  render(
    <DataTable
      caption="Segments"
      columns={columns}
      rows={rows}
      rowKey={({ name }) => name}
      onSelect={onSelect}
      selectedKey="seg-2"
    />,
  );
  expect(screen.getByRole('row', { selected: true })).toHaveTextContent('seg-2');
  await userEvent.click(screen.getByText('9'));
  expect(onSelect.mock.calls).toEqual([[rows[1]]]);
  screen.getByRole('button', { name: 'seg-10' }).focus();
  await userEvent.keyboard('{Enter}');
  expect(onSelect.mock.calls).toEqual([[rows[1]], [rows[0]]]);
});

test('without rows it shows what was given for that', () => {
  render(
    <DataTable
      caption="Segments"
      columns={columns}
      rows={[]}
      rowKey={({ name }) => name}
      empty="No segment yet"
    />,
  );
  expect(screen.getByText('No segment yet')).toBeVisible();
});

test('what is not known comes last, whichever way it is sorted', async () => {
  const some: readonly { readonly name: string; readonly most?: number }[] = [
    { name: 'unknown' },
    { name: 'ten', most: 10 },
    { name: 'two', most: 2 },
  ];
  render(
    <DataTable
      caption="Limits"
      columns={[
        { key: 'name', head: 'Name', cell: ({ name }) => name },
        {
          key: 'most',
          head: 'Most',
          cell: ({ most }) => most,
          sortBy: ({ most }) => most,
          highestFirst: true,
        },
      ]}
      rows={some}
      rowKey={({ name }) => name}
    />,
  );
  await userEvent.click(screen.getByRole('button', { name: 'Most' }));
  expect(names()).toEqual(['ten', 'two', 'unknown']);
  await userEvent.click(screen.getByRole('button', { name: 'Most' }));
  expect(names()).toEqual(['two', 'ten', 'unknown']);
});

test('of thousands of rows only those in sight are drawn, and each says which it is', () => {
  const many = Array.from({ length: 4_000 }, (_row, i): Row => ({ name: `seg-${i}`, vlan: i }));
  render(<DataTable caption="Segments" columns={columns} rows={many} rowKey={({ name }) => name} />);
  const table = screen.getByRole('table', { name: 'Segments' });
  expect(table).toHaveAttribute('aria-rowcount', '4001');
  expect(within(table).getAllByRole('row').length).toBeLessThan(60);
  expect(screen.getByRole('row', { name: /seg-7 / })).toHaveAttribute('aria-rowindex', '9');
});

test('scrolling a long table draws the rows that come into sight', () => {
  const many = Array.from({ length: 4_000 }, (_row, i): Row => ({ name: `seg-${i}`, vlan: i }));
  render(<DataTable caption="Segments" columns={columns} rows={many} rowKey={({ name }) => name} />);
  const box = screen.getByRole('table', { name: 'Segments' }).parentElement!;
  fireEvent.scroll(box, { target: { scrollTop: 35 * 2_000 } });
  expect(screen.getByRole('row', { name: /seg-2000 / })).toHaveAttribute('aria-rowindex', '2002');
  expect(screen.queryByRole('row', { name: /seg-7 / })).not.toBeInTheDocument();
});
