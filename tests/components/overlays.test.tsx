import { act, render, screen, waitFor } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { describe, expect, test, vi } from 'vitest';
import { Button } from '../../src/components/button.tsx';
import { Dialog } from '../../src/components/dialog.tsx';
import { Menu } from '../../src/components/menu.tsx';
import { dismissToast, showToast, ToastRegion } from '../../src/components/toast.tsx';
import { Tooltip, TooltipProvider } from '../../src/components/tooltip.tsx';

describe('a dialog', () => {
  function Naming({ onSubmit = () => undefined }: { readonly onSubmit?: () => void }) {
    const [open, setOpen] = useState(false);
    return (
      <>
        <Button onClick={() => setOpen(true)}>Name it</Button>
        <Dialog
          open={open}
          onOpenChange={setOpen}
          onSubmit={onSubmit}
          title="New name"
          footer={<Button type="submit">Save</Button>}
        >
          <input aria-label="Name" />
        </Dialog>
      </>
    );
  }

  test('has a name, begins in its first field, and gives the focus back when it closes', async () => {
    const user = userEvent.setup();
    render(<Naming />);
    await user.click(screen.getByRole('button', { name: 'Name it' }));
    expect(screen.getByRole('dialog', { name: 'New name' })).toBeVisible();
    expect(screen.getByLabelText('Name')).toHaveFocus();
    await user.keyboard('{Escape}');
    expect(screen.queryByRole('dialog')).not.toBeInTheDocument();
    await waitFor(() => expect(screen.getByRole('button', { name: 'Name it' })).toHaveFocus());
  });

  test('leads to the content of the page when what opened it can’t take the focus back', async () => {
    function Applying() {
      const [open, setOpen] = useState(false);
      const [done, setDone] = useState(false);
      return (
        <main id="main" tabIndex={-1}>
          <Button disabled={done} onClick={() => setOpen(true)}>
            Apply…
          </Button>
          <Dialog open={open} onOpenChange={setOpen} title="Apply">
            <Button
              onClick={() => {
                setDone(true);
                setOpen(false);
              }}
            >
              Apply all
            </Button>
          </Dialog>
        </main>
      );
    }
    const user = userEvent.setup();
    render(<Applying />);
    await user.click(screen.getByRole('button', { name: 'Apply…' }));
    await user.click(screen.getByRole('button', { name: 'Apply all' }));
    await waitFor(() => expect(screen.getByRole('main')).toHaveFocus());
  });

  test('keeps the focus inside while it is open', async () => {
    const user = userEvent.setup();
    render(<Naming />);
    await user.click(screen.getByRole('button', { name: 'Name it' }));
    const dialog = screen.getByRole('dialog');
    for (let press = 0; press < 5; press += 1) {
      await user.tab();
      expect(dialog).toContainElement(document.activeElement as HTMLElement);
    }
  });

  test('is sent by Enter in a field', async () => {
    const user = userEvent.setup();
    const onSubmit = vi.fn();
    render(<Naming onSubmit={onSubmit} />);
    await user.click(screen.getByRole('button', { name: 'Name it' }));
    await user.keyboard('fw{Enter}');
    expect(onSubmit).toHaveBeenCalledTimes(1);
  });

  test('puts no style element into the page, which the content security policy would refuse', async () => {
    const user = userEvent.setup();
    render(<Naming />);
    await user.click(screen.getByRole('button', { name: 'Name it' }));
    expect(document.querySelectorAll('style')).toHaveLength(0);
  });
});

describe('a menu', () => {
  test('opens by keyboard, moves by arrows, does what is chosen, and puts no style element into the page', async () => {
    const user = userEvent.setup();
    const rename = vi.fn();
    const archive = vi.fn();
    render(
      <Menu
        trigger={<Button>More</Button>}
        groups={[
          {
            actions: [
              { label: 'Rename', onSelect: rename },
              { label: 'Archive', onSelect: archive },
            ],
          },
        ]}
      />,
    );
    await user.tab();
    await user.keyboard('{Enter}');
    expect(document.querySelectorAll('style')).toHaveLength(0);
    await user.keyboard('{ArrowDown}{Enter}');
    expect(archive).toHaveBeenCalledTimes(1);
    expect(rename).not.toHaveBeenCalled();
    await waitFor(() => expect(screen.getByRole('button', { name: 'More' })).toHaveFocus());
  });

  test('shows which of several is chosen', async () => {
    const user = userEvent.setup();
    const onChange = vi.fn();
    const options = [
      { value: 'paper', label: 'Paper' },
      { value: 'slate', label: 'Slate' },
    ];
    render(
      <Menu
        trigger={<Button>More</Button>}
        groups={[{ choice: { label: 'Theme', value: 'paper', options, onChange } }]}
      />,
    );
    await user.click(screen.getByRole('button', { name: 'More' }));
    expect(screen.getByRole('menuitemradio', { name: 'Paper' })).toBeChecked();
    await user.click(screen.getByRole('menuitemradio', { name: 'Slate' }));
    expect(onChange).toHaveBeenCalledWith('slate');
  });
});

test('a tooltip comes with the focus and describes what it is on', async () => {
  render(
    <TooltipProvider>
      <Tooltip text="port 4, 1 Gbit/s">
        <button type="button">4</button>
      </Tooltip>
    </TooltipProvider>,
  );
  await userEvent.tab();
  await waitFor(() => expect(screen.getByRole('button')).toHaveAccessibleDescription('port 4, 1 Gbit/s'));
});

describe('toasts', () => {
  test('are said from anywhere, offer a way back and can be taken away', async () => {
    const undo = vi.fn();
    render(<ToastRegion />);
    let id = 0;
    act(() => {
      id = showToast({ tone: 'done', text: 'The cord is whole.', action: { label: 'Undo', onSelect: undo } });
    });
    await userEvent.click(screen.getByRole('button', { name: 'Undo' }));
    expect(undo).toHaveBeenCalledTimes(1);
    act(() => dismissToast(id));
    expect(screen.queryByText('The cord is whole.')).not.toBeInTheDocument();
  });

  test('never stand in more than three', () => {
    render(<ToastRegion />);
    act(() => {
      for (const text of ['one', 'two', 'three', 'four']) showToast({ tone: 'failed', text });
    });
    expect(screen.queryByText('one')).not.toBeInTheDocument();
    expect(screen.getByText('four')).toBeVisible();
  });
});
