import { render, screen, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { expect, test, vi } from 'vitest';
import { compareDesigns } from '../../../src/engine/diff/compare-designs.ts';
import { applyPatch } from '../../../src/engine/model/merge-patch.ts';
import { DifferenceLegend, DifferenceList } from '../../../src/features/revisions/difference-list.tsx';
import { pairDesign } from '../../support/designs.ts';

const before = pairDesign();
const patch = {
  sites: { s0: { zone: 'ashore' } },
  devices: { x: { kind: 'switch', name: 'sw-quay', site: 's1', ports: {} } },
} as const;
const { changes } = compareDesigns(before, applyPatch(before, patch));

test('differences stand by site, each with its sign in words, its sentence and who made it', async () => {
  const onChoose = vi.fn();
  render(
    <DifferenceList
      changes={changes}
      patches={[{ by: 'Rosa Halloran', at: '2026-12-01T10:00:00Z', patch }]}
      chosen={undefined}
      onChoose={onChoose}
    />,
  );
  const gullhaven = within(screen.getByRole('region', { name: 'Gullhaven' }));
  expect(gullhaven.getByRole('button').textContent).toMatch(
    /Added: Switch sw-quay added.*Rosa Halloran, 1 December 2026/,
  );
  expect(screen.getByText('Zone of site Head office set to ashore')).toBeInTheDocument();
  await userEvent.click(gullhaven.getByRole('button'));
  expect(onChoose).toHaveBeenCalledWith(changes.find(({ kind }) => kind === 'added'));
});

test('the legend says by sign and word how much there is of each kind', () => {
  render(<DifferenceLegend changes={changes} />);
  expect(screen.getByRole('list', { name: 'Legend' }).textContent).toMatch(
    /\+.*Added 1.*−.*Removed 0.*Δ.*Changed 1/,
  );
});
