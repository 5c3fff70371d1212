import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, test, vi } from 'vitest';
import { CellGrid, ReadCell } from '../../src/components/cell.tsx';
import {
  CheckCell,
  ChoiceCell,
  CommitCell,
  InputCell,
  NumberCell,
  SelectCell,
} from '../../src/components/field-cells.tsx';

test('a cell that is read has its label above its value and takes no focus', async () => {
  render(<ReadCell label="Largest IP">1396 B</ReadCell>);
  expect(screen.getByText('Largest IP')).toBeVisible();
  expect(screen.getByText('1396 B')).toBeVisible();
  await userEvent.tab();
  expect(document.body).toHaveFocus();
});

test('what is wrong stands beneath the whole grid and is told with its cell', () => {
  render(
    <CellGrid columns={2}>
      <InputCell label="VLAN" value="4095" readOnly error="VLAN 4095 is reserved. Choose 1 to 4094." />
      <InputCell label="UDP port" value="4789" readOnly />
    </CellGrid>,
  );
  const vlan = screen.getByLabelText('VLAN');
  expect(vlan).toBeInvalid();
  expect(vlan).toHaveAccessibleDescription('VLAN 4095 is reserved. Choose 1 to 4094.');
  expect(screen.getByLabelText('UDP port')).toBeValid();
  const message = screen.getByRole('alert');
  expect(screen.getByLabelText('UDP port').compareDocumentPosition(message)).toBe(
    Node.DOCUMENT_POSITION_FOLLOWING,
  );
});

test('a hint is told with the cell until something is wrong', () => {
  const { rerender } = render(<InputCell label="Name" hint="As on the gateway" value="" readOnly />);
  expect(screen.getByLabelText('Name')).toHaveAccessibleDescription('As on the gateway');
  rerender(
    <InputCell label="Name" hint="As on the gateway" value="" readOnly error="Name is empty. Type it." />,
  );
  expect(screen.getByLabelText('Name')).toHaveAccessibleDescription('Name is empty. Type it.');
});

describe('a cell whose text counts when it is left', () => {
  test('commits once, on leaving it or on Enter, and never what it had', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    render(<CommitCell label="Name" value="fw-ho" onCommit={onCommit} />);
    const cell = screen.getByLabelText('Name');
    await user.click(cell);
    await user.tab();
    expect(onCommit).not.toHaveBeenCalled();
    await user.type(cell, '-2{Enter}');
    expect(onCommit.mock.calls).toEqual([['fw-ho-2']]);
    await user.tab();
    expect(onCommit).toHaveBeenCalledTimes(1);
  });

  test('takes its old text back on Escape, and lets the next Escape through', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    const around = vi.fn();
    render(
      <div onKeyDown={({ key }) => key === 'Escape' && around()}>
        <CommitCell label="Name" value="fw-ho" onCommit={onCommit} />
      </div>,
    );
    const cell = screen.getByLabelText('Name');
    await user.type(cell, 'x{Escape}');
    expect(cell).toHaveValue('fw-ho');
    expect(around).not.toHaveBeenCalled();
    await user.keyboard('{Escape}');
    expect(around).toHaveBeenCalledTimes(1);
    await user.tab();
    expect(onCommit).not.toHaveBeenCalled();
  });

  test('keeps a text that is wrong, says why, and commits it once it is right', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    const validate = (text: string) =>
      text.includes(' ') ? `Name ${text} has a blank. Take it out.` : undefined;
    render(<CommitCell label="Name" value="fw" onCommit={onCommit} validate={validate} />);
    const cell = screen.getByLabelText('Name');
    await user.type(cell, ' ho{Enter}');
    expect(cell).toHaveValue('fw ho');
    expect(cell).toHaveAccessibleDescription('Name fw ho has a blank. Take it out.');
    expect(onCommit).not.toHaveBeenCalled();
    await user.clear(cell);
    expect(cell).toBeValid();
    await user.type(cell, 'fw-ho{Enter}');
    expect(onCommit).toHaveBeenCalledWith('fw-ho');
  });

  test('shows what came from elsewhere while nobody types', () => {
    const { rerender } = render(<CommitCell label="Name" value="fw" onCommit={() => undefined} />);
    rerender(<CommitCell label="Name" value="fw-2" onCommit={() => undefined} />);
    expect(screen.getByLabelText('Name')).toHaveValue('fw-2');
  });
});

describe('a cell for a whole number', () => {
  test.each([
    ['4095', 'VLAN 4095 is out of range. Type a whole number from 1 to 4094.'],
    ['0', 'VLAN 0 is out of range. Type a whole number from 1 to 4094.'],
    ['12a', 'VLAN 12a is not a whole number. Type a whole number from 1 to 4094.'],
    ['-3', 'VLAN -3 is not a whole number. Type a whole number from 1 to 4094.'],
    ['1.5', 'VLAN 1.5 is not a whole number. Type a whole number from 1 to 4094.'],
  ])('refuses %s with field, value and way out', async (text, sentence) => {
    const onCommit = vi.fn();
    render(<NumberCell label="VLAN" value={110} min={1} max={4094} onCommit={onCommit} />);
    const cell = screen.getByLabelText('VLAN');
    await userEvent.clear(cell);
    await userEvent.type(cell, `${text}{Enter}`);
    expect(cell).toHaveAccessibleDescription(sentence);
    expect(onCommit).not.toHaveBeenCalled();
  });

  test('commits numbers, and unknown for an emptied cell', async () => {
    const onCommit = vi.fn();
    render(<NumberCell label="VLAN" value={110} min={1} max={4094} onCommit={onCommit} />);
    const cell = screen.getByLabelText('VLAN');
    await userEvent.clear(cell);
    await userEvent.type(cell, '120{Enter}');
    await userEvent.clear(cell);
    await userEvent.tab();
    expect(onCommit.mock.calls).toEqual([[120], [undefined]]);
  });

  test('insists on a value where one must be', async () => {
    const onCommit = vi.fn();
    render(<NumberCell label="VNI" required value={5} min={0} max={9} onCommit={onCommit} />);
    await userEvent.clear(screen.getByLabelText('VNI'));
    await userEvent.tab();
    expect(screen.getByRole('alert')).toHaveTextContent('VNI is empty. Type a whole number from 0 to 9.');
    expect(onCommit).not.toHaveBeenCalled();
  });
});

test('a cell to choose in offers its options and nothing else', async () => {
  const onChange = vi.fn();
  const onClear = vi.fn();
  function Choosing() {
    const [value, setValue] = useState<'a' | 'b' | ''>('');
    return (
      <SelectCell
        label="Protected by"
        value={value}
        placeholder="nothing"
        options={[
          { value: 'a', label: 'as-ho-gul' },
          { value: 'b', label: 'as-ho-orr' },
        ]}
        onChange={(chosen) => {
          onChange(chosen);
          setValue(chosen);
        }}
        onClear={onClear}
      />
    );
  }
  render(<Choosing />);
  const cell = screen.getByLabelText('Protected by');
  expect(cell).toHaveDisplayValue('nothing');
  await userEvent.selectOptions(cell, 'as-ho-orr');
  expect(onChange).toHaveBeenCalledWith('b');
  await userEvent.selectOptions(cell, 'nothing');
  expect(onClear).toHaveBeenCalledTimes(1);
});

test('a cell that is ticked says in words what the tick means', async () => {
  function Ticking() {
    const [checked, setChecked] = useState(false);
    return <CheckCell label="Outer DF" checked={checked} onChange={setChecked} words={['set', 'not set']} />;
  }
  render(<Ticking />);
  const cell = screen.getByRole('checkbox', { name: /Outer DF/ });
  expect(screen.getByText('not set')).toBeVisible();
  await userEvent.click(cell);
  expect(cell).toBeChecked();
  expect(screen.getByText('set')).toBeVisible();
});

test('choices side by side are radio buttons, so arrow keys move between them', async () => {
  function Choosing() {
    const [value, setValue] = useState<'bridge' | 'cross-connect'>('bridge');
    return (
      <ChoiceCell
        label="Kind"
        value={value}
        onChange={setValue}
        options={[
          { value: 'bridge', label: 'bridge' },
          { value: 'cross-connect', label: 'cross-connect' },
        ]}
      />
    );
  }
  render(<Choosing />);
  await userEvent.tab();
  expect(screen.getByRole('radio', { name: 'bridge' })).toHaveFocus();
  await userEvent.keyboard('{ArrowRight}');
  expect(screen.getByRole('radio', { name: 'cross-connect' })).toBeChecked();
});
