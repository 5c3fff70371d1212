import { render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { describe, expect, it, vi } from 'vitest';
import { CellGrid } from '../../src/components/cell.tsx';
import { CommitAreaCell, CommitCell } from '../../src/components/field-cells.tsx';

describe('a cell that commits', () => {
  it('commits once on Enter and not again when it is left', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    render(<CommitCell label="Name" value="fw-gul" onCommit={onCommit} />);
    await user.clear(screen.getByLabelText('Name'));
    await user.type(screen.getByLabelText('Name'), 'fw-orr{Enter}');
    await user.tab();
    expect(onCommit.mock.calls).toEqual([['fw-orr']]);
  });

  it('brings the old text back on Escape', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    render(<CommitCell label="Name" value="fw-gul" onCommit={onCommit} />);
    await user.type(screen.getByLabelText('Name'), 'x{Escape}');
    await user.tab();
    expect(screen.getByLabelText('Name')).toHaveValue('fw-gul');
    expect(onCommit).not.toHaveBeenCalled();
  });

  it('takes several lines and commits them when it is left', async () => {
    const user = userEvent.setup();
    const onCommit = vi.fn();
    render(<CommitAreaCell label="Notes" value="" onCommit={onCommit} />);
    await user.type(screen.getByLabelText('Notes'), 'One{Enter}two');
    expect(onCommit).not.toHaveBeenCalled();
    await user.tab();
    expect(onCommit.mock.calls).toEqual([['One\ntwo']]);
  });

  it('says at which end it stands and what a check says about it', () => {
    render(
      <CellGrid columns={2}>
        {['Head office', 'Gullhaven'].map((place) => (
          <CommitCell
            key={place}
            label="VNI"
            place={place}
            value="10120"
            onCommit={vi.fn()}
            marked={{ severity: 'blocking', sentence: 'The VNIs differ' }}
          />
        ))}
      </CellGrid>,
    );
    expect(screen.getByLabelText('VNI at Gullhaven')).toHaveAccessibleDescription('The VNIs differ');
    expect(screen.queryByRole('alert')).toBeNull();
  });
});
