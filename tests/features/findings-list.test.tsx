import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { useState } from 'react';
import { expect, test, vi } from 'vitest';
import type { FindingItem } from '../../src/features/findings/finding-item.ts';
import { FindingsList } from '../../src/features/findings/findings-list.tsx';

const finding = (changes: Partial<FindingItem> & Pick<FindingItem, 'key' | 'number'>): FindingItem => ({
  severity: 'blocking',
  sentence: `Finding ${changes.number}`,
  elements: 'tn-ho-gul-120',
  zone: 'B5',
  why: 'Each end drops what the other sends.',
  seen: 'Pings pass, frames do not.',
  sources: ['RFC 7348, section 5', 'common practice, no source'],
  fixes: [
    { id: 'set-b', label: `Cure ${changes.number}`, sentence: 'Sets the VNI at Gullhaven to 10120.' },
    { id: 'set-a', label: `Other cure ${changes.number}`, sentence: 'Sets the VNI at Head office to 10210.' },
  ],
  ...changes,
});
const waiver = { id: 'w-1', by: 'Noor Okafor', until: '31 March 2027', reason: 'Agreed with the port' };
const findings = [
  finding({ key: 'a', number: 1, sentence: 'VNI 10120 at Head office, 10210 at Gullhaven' }),
  finding({ key: 'b', number: 2, severity: 'degrading' }),
  finding({ key: 'c', number: 3, severity: 'advisory', zone: undefined, waiver }),
];

interface Asked {
  readonly onSelect?: (key: string) => void;
  readonly onApplyFix?: (findingKey: string, fixId: string) => void;
  readonly onPreviewFix?: (preview: { readonly findingKey: string; readonly fixId: string } | null) => void;
}

function List({
  items = findings,
  canFix = true,
  onSelect,
  onApplyFix = () => undefined,
  onPreviewFix,
}: Asked & { readonly items?: readonly FindingItem[]; readonly canFix?: boolean }) {
  const [selected, setSelected] = useState<string | null>(null);
  return (
    <FindingsList
      findings={items}
      selectedKey={selected}
      onSelect={(key) => {
        setSelected(key);
        onSelect?.(key);
      }}
      canFix={canFix}
      onApplyFix={onApplyFix}
      onPreviewFix={onPreviewFix}
      empty="Nothing is wrong"
    />
  );
}
const row = (number: number): HTMLElement => screen.getByRole('button', { name: new RegExp(`^${number} `) });

test('a row tells number, severity, sentence, elements and zone', () => {
  render(<List />);
  expect(row(1)).toHaveAccessibleName(
    '1 Blocking VNI 10120 at Head office, 10210 at Gullhaven tn-ho-gul-120 at B5',
  );
  expect(row(3)).toHaveAccessibleName('3 Advisory Finding 3 (waived until 31 March 2027) tn-ho-gul-120');
});

test('without findings it says so', () => {
  render(<List items={[]} />);
  expect(screen.getByText('Nothing is wrong')).toBeVisible();
  expect(screen.queryByRole('list')).not.toBeInTheDocument();
});

test('arrow keys, Home and End go from row to row and select, and stop at both ends', async () => {
  const user = userEvent.setup();
  const onSelect = vi.fn();
  render(<List onSelect={onSelect} />);
  await user.tab();
  expect(row(1)).toHaveFocus();
  await user.keyboard('{ArrowDown}{ArrowDown}{ArrowDown}');
  expect(row(3)).toHaveFocus();
  await user.keyboard('{Home}{ArrowUp}{End}');
  expect(onSelect.mock.calls.flat()).toEqual(['b', 'c', 'c', 'a', 'a', 'c']);
});

test('rows are one stop of the Tab key: the selected one', async () => {
  const user = userEvent.setup();
  render(<List canFix={false} />);
  await user.tab();
  await user.keyboard('{ArrowDown}');
  await user.tab();
  expect(document.body).toHaveFocus();
  await user.tab({ shift: true });
  expect(row(2)).toHaveFocus();
});

test('Enter opens a row with why, what is seen, on what it rests and every cure; Enter again closes it', async () => {
  const user = userEvent.setup();
  render(<List />);
  await user.tab();
  await user.keyboard('{Enter}');
  expect(row(1)).toHaveAttribute('aria-expanded', 'true');
  for (const text of [
    'Each end drops what the other sends.',
    'Pings pass, frames do not.',
    'RFC 7348, section 5; common practice, no source',
    'Sets the VNI at Gullhaven to 10120.',
    'Sets the VNI at Head office to 10210.',
  ]) {
    expect(screen.getByText(text)).toBeVisible();
  }
  await user.keyboard('{Enter}');
  expect(screen.queryByText('Pings pass, frames do not.')).not.toBeInTheDocument();
});

test('the first cure stands in the row, the others in its details; each is applied by its id', async () => {
  const user = userEvent.setup();
  const onApplyFix = vi.fn();
  render(<List onApplyFix={onApplyFix} />);
  await user.click(screen.getByRole('button', { name: 'Cure 1' }));
  await user.click(row(1));
  await user.click(screen.getByRole('button', { name: 'Other cure 1' }));
  expect(onApplyFix.mock.calls).toEqual([
    ['a', 'set-b'],
    ['a', 'set-a'],
  ]);
});

test('a cure is shown on the sheet while its button is pointed at or has the focus', async () => {
  const user = userEvent.setup();
  const onPreviewFix = vi.fn();
  render(<List onPreviewFix={onPreviewFix} />);
  const button = screen.getByRole('button', { name: 'Cure 2' });
  await user.hover(button);
  expect(onPreviewFix).toHaveBeenLastCalledWith({ findingKey: 'b', fixId: 'set-b' });
  await user.unhover(button);
  expect(onPreviewFix).toHaveBeenLastCalledWith(null);
  button.focus();
  expect(onPreviewFix).toHaveBeenLastCalledWith({ findingKey: 'b', fixId: 'set-b' });
});

test('who may not change the design is told the cures and offered no button', async () => {
  const user = userEvent.setup();
  render(<List canFix={false} />);
  await user.click(row(1));
  expect(screen.getByText('Cure 1')).toBeVisible();
  expect(screen.queryByRole('button', { name: 'Cure 1' })).not.toBeInTheDocument();
});

test('cures that are not worked out yet, and none at all, are two different sentences', async () => {
  const user = userEvent.setup();
  render(
    <List
      items={[
        finding({ key: 'a', number: 1, fixes: undefined }),
        finding({ key: 'b', number: 2, fixes: [] }),
      ]}
    />,
  );
  await user.click(row(1));
  expect(screen.getByText('Being worked out…')).toBeVisible();
  await user.click(row(2));
  expect(screen.getByText(/It needs a decision of yours/)).toBeVisible();
  expect(screen.queryByText('Being worked out…')).not.toBeInTheDocument();
});

test('the selected row is marked for screen readers', async () => {
  render(<List />);
  await userEvent.click(row(2));
  const items = within(screen.getByRole('list', { name: 'Findings' })).getAllByRole('listitem');
  expect(items.filter((item) => item.getAttribute('aria-current') === 'true')).toHaveLength(1);
});
