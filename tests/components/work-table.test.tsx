import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { expect, test, vi } from 'vitest';
import { ToastRegion } from '../../src/components/toast.tsx';
import { useTableView } from '../../src/components/use-table-view.ts';
import type { Column } from '../../src/components/table-view.ts';
import { WorkTable } from '../../src/components/work-table.tsx';

interface Row {
  readonly name: string;
  readonly site: string;
  readonly vlan: number;
}
const rows: readonly Row[] = [
  { name: 'Ticketing', site: 'Gullhaven', vlan: 110 },
  { name: 'Berth control', site: 'Skerry', vlan: 120 },
  { name: 'CCTV', site: 'Skerry', vlan: 13 },
];
const columns: readonly Column<Row>[] = [
  { key: 'name', head: 'Segment', cell: ({ name }) => <b>{name}</b>, sortBy: ({ name }) => name },
  { key: 'site', head: 'Site', cell: ({ site }) => site, text: ({ site }) => site },
  { key: 'vlan', head: 'VLAN', cell: ({ vlan }) => vlan, sortBy: ({ vlan }) => vlan, optional: true },
];
const table = (
  <WorkTable caption="Segments" filterLabel="Segment or site" {...{ columns, rows }} rowKey={keyOf} />
);
function keyOf({ name }: Row): string {
  return name;
}
const bodyRows = () => screen.getAllByRole('row').slice(1);

test('the filter keeps rows in which every word stands, and says of how many', async () => {
  render(table);
  await userEvent.type(screen.getByRole('searchbox', { name: 'Segment or site' }), 'sker 13');
  expect(bodyRows().map((row) => row.textContent)).toEqual(['CCTVSkerry']);
  expect(screen.getByRole('status')).toHaveTextContent('1 of 3');
});

test('a filter that finds nothing says so and gives the way back', async () => {
  render(table);
  await userEvent.type(screen.getByRole('searchbox'), 'lighthouse');
  expect(screen.getByText(/No row says “lighthouse”/)).toBeVisible();
  await userEvent.click(screen.getByRole('button', { name: 'Show all' }));
  expect(bodyRows()).toHaveLength(3);
});

test('columns are chosen in a menu that stays open, and one of them has to stay', async () => {
  render(table);
  expect(screen.queryByRole('columnheader', { name: 'VLAN' })).not.toBeInTheDocument();
  await userEvent.click(screen.getByRole('button', { name: 'Columns' }));
  await userEvent.click(screen.getByRole('menuitemcheckbox', { name: 'VLAN' }));
  await userEvent.click(screen.getByRole('menuitemcheckbox', { name: 'Segment' }));
  await userEvent.click(screen.getByRole('menuitemcheckbox', { name: 'Site' }));
  expect(screen.getByRole('menuitemcheckbox', { name: 'VLAN' })).toHaveAttribute('aria-disabled', 'true');
  await userEvent.keyboard('{Escape}');
  expect(screen.getAllByRole('columnheader').map((head) => head.textContent)).toEqual(['VLAN']);
});

test('what is copied is what is shown: its rows, its order, its columns', async () => {
  const user = userEvent.setup();
  render(table);
  await user.type(screen.getByRole('searchbox'), 'skerry');
  await user.click(screen.getByRole('button', { name: 'Segment' }));
  await user.click(screen.getByRole('button', { name: 'Segment' }));
  await user.click(screen.getByRole('button', { name: 'Copy CSV' }));
  expect(await navigator.clipboard.readText()).toBe(
    'Segment,Site\r\nCCTV,Skerry\r\nBerth control,Skerry\r\n',
  );
});

test('a browser that refuses its clipboard gets a file', async () => {
  const user = userEvent.setup();
  vi.spyOn(navigator.clipboard, 'writeText').mockRejectedValue(new Error('not allowed'));
  URL.createObjectURL = () => 'blob:segments';
  const clicked = vi.spyOn(HTMLAnchorElement.prototype, 'click').mockImplementation(() => undefined);
  render(
    <>
      {table}
      <ToastRegion />
    </>,
  );
  await user.click(screen.getByRole('button', { name: 'Copy CSV' }));
  await waitFor(() => expect(clicked).toHaveBeenCalledOnce());
  expect(await screen.findByText(/3 rows saved as segments\.csv/)).toBeVisible();
});

function InAddress() {
  const view = useTableView('segs');
  return (
    <>
      <WorkTable caption="Segments" filterLabel="Segment" view={view} {...{ columns, rows }} rowKey={keyOf} />
      <output>{useLocation().search}</output>
    </>
  );
}

test('a view kept in the address comes back from it', async () => {
  render(
    <MemoryRouter initialEntries={['/?segs-sort=-vlan&segs-columns=name,vlan&segs-filter=1']}>
      <InAddress />
    </MemoryRouter>,
  );
  expect(bodyRows().map((row) => within(row).getAllByRole('cell')[0]?.textContent)).toEqual([
    'Berth control',
    'Ticketing',
    'CCTV',
  ]);
  await userEvent.click(screen.getByRole('button', { name: 'VLAN' }));
  expect(screen.getByText(/segs-sort=vlan/)).toBeVisible();
});
