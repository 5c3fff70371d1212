import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { terminalsStretch } from '../../../seeds/demo-designs/terminals-stretch.ts';
import { applyPatch, type MergePatch } from '../../../src/engine/model/merge-patch.ts';
import { InventoryDialog } from '../../../src/features/inventory/inventory-dialog.tsx';
import {
  inputOf,
  matchedTo,
  readInventoryFile,
  takenFor,
} from '../../../src/features/inventory/inventory-files.ts';

const demo = terminalsStretch('Terminals stretch', 'SMF-L2-004');
const csv = (name: string, ...lines: readonly string[]): File =>
  new File([lines.join('\r\n')], name, { type: 'text/csv' });

const show = (onBringIn?: (patch: MergePatch, rowCount: number) => void) => {
  render(<InventoryDialog design={demo} onBringIn={onBringIn} onClose={() => undefined} />);
  return { user: userEvent.setup(), choose: () => screen.getByLabelText('CSV files') };
};

describe('an inventory brought in', () => {
  it('is matched, counted and brought in as one change', async () => {
    const onBringIn = vi.fn<(patch: MergePatch, rowCount: number) => void>();
    const { user, choose } = show(onBringIn);
    await user.upload(choose(), [
      csv('rooms.csv', 'Location;Remarks', 'Marl;New pontoon', 'Skerry;'),
      csv('kit.csv', 'Hostname,Type,Location', 'sw-marl,Switch,Marl'),
    ]);
    expect(await screen.findByText(/1 added, 0 changed, 1 as they are/)).toBeVisible();
    expect(screen.getByText(/1 added, 0 changed, 0 as they are/)).toBeVisible();
    await user.click(screen.getByRole('button', { name: 'Bring in 2 rows' }));
    const [patch, rows] = onBringIn.mock.calls[0]!;
    expect(rows).toBe(2);
    const after = applyPatch(demo, patch);
    const marl = Object.entries(after.sites).find(([, { name }]) => name === 'Marl')!;
    expect(marl[1].notes).toBe('New pontoon');
    expect(Object.values(after.devices).find(({ name }) => name === 'sw-marl')).toMatchObject({
      kind: 'switch',
      site: marl[0],
    });
  });

  it('with a cell that can’t be taken names line, column, value and way out, and brings nothing in', async () => {
    const { user, choose } = show(vi.fn());
    await user.upload(choose(), csv('ports.csv', 'Device,Port,MTU', 'fw-gul,1,60', 'fw-nowhere,1,1500'));
    const table = await screen.findByRole('table', { name: 'Cells that can’t be taken' });
    const row = within(table).getByRole('row', { name: /fw-nowhere/ });
    expect(row).toHaveTextContent(/Ports3Devicefw-nowherea device of this design/);
    expect(screen.queryByRole('button', { name: /^Bring in \d/ })).not.toBeInTheDocument();
  });

  it('asks for a needed column that it can’t find, and takes the one that is chosen', async () => {
    const { user, choose } = show(vi.fn());
    await user.upload(choose(), csv('sites.csv', 'Ort,Notes', 'Marl,New'));
    const cell = await screen.findByLabelText('Site (needed)');
    expect(cell).toBeInvalid();
    await user.selectOptions(cell, 'Ort');
    expect(await screen.findByText(/1 added/)).toBeVisible();
  });

  it('says what is wrong with a file that is no table', async () => {
    const { user, choose } = show(vi.fn());
    await user.upload(choose(), csv('broken.csv', 'Site,Notes', 'Marl,"open'));
    expect(await screen.findByRole('alert')).toHaveTextContent(/broken\.csv: Line 2: a quotation mark/);
  });

  it('those who only read are offered tables to take out', () => {
    show();
    expect(screen.queryByLabelText('CSV files')).not.toBeInTheDocument();
    expect(screen.getAllByRole('button', { name: 'Save CSV' })).toHaveLength(5);
  });
});

describe('files', () => {
  const read = (name: string, text: string) => {
    const answer = readInventoryFile(name, text);
    if (!answer.ok) throw new Error(answer.problem);
    return answer.file;
  };

  it('are taken for the table that their heads match best, a fitting name first', () => {
    expect(read('list.csv', 'Host,Site,Segment,IP address\nx,y,A,').table).toBe('hosts');
    expect(read('list.csv', 'Segment,Name,VLAN,Subnet\nA,T,110,').table).toBe('segments');
    expect(read('devices.csv', 'Device,Kind,Site\na,switch,b').table).toBe('devices');
    expect(read('list.csv', 'Device,Port,Speed\na,1,1000').table).toBe('ports');
  });

  it('are refused when two are taken for one table, and one head serves one column', () => {
    const one = read('a.csv', 'Site\nMarl');
    const two = takenFor(read('b.csv', 'Host,Site\nx,y'), 'sites');
    expect(inputOf([one, two])).toEqual({
      ok: false,
      problem: 'a.csv and b.csv are both taken for sites: take one away or say what it is.',
    });
    const hosts = read('b.csv', 'Host,Site\nx,y');
    expect(matchedTo(hosts, 'segment', 1).match).toEqual({ name: 0, segment: 1 });
    expect(matchedTo(hosts, 'site', undefined).match).toEqual({ name: 0 });
  });
});
