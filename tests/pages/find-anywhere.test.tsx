import { QueryClientProvider } from '@tanstack/react-query';
import { act, render, screen } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter, useLocation } from 'react-router-dom';
import { afterEach, expect, it } from 'vitest';
import { clearDesk, offerCommands } from '../../src/canvas/desk-state.ts';
import type { ElementRef } from '../../src/engine/model/design.ts';
import { createQueryClient } from '../../src/lib/query-client.ts';
import { FindAnywhere } from '../../src/pages/find-anywhere.tsx';
import { DesignPlaceProvider } from '../../src/workspace/design-place.tsx';
import { OpenDesignProvider } from '../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../canvas/inspector/render-inspector.tsx';
import { designSummary, engagement, fakeApi, json } from '../support/fake-api.ts';
import { pairDesign } from '../support/designs.ts';

const Address = () => <output>{useLocation().pathname}</output>;

/** The search of a design's page, as on the page at `path` of design d-1. */
const onPage = (path: string) => {
  fakeApi({
    'GET /api/workspaces/w-1/engagements': json({
      engagements: [
        engagement({
          name: 'Saltmarsh Ferries',
          designs: [
            designSummary({ id: 'd-1', title: 'This one' }),
            designSummary({ id: 'd-2', title: 'Ring terminals' }),
          ],
        }),
      ],
    }),
  });
  const design = openInMemory(pairDesign(), true);
  render(
    <QueryClientProvider client={createQueryClient()}>
      <MemoryRouter initialEntries={[path]}>
        <DesignPlaceProvider place={{ designId: 'd-1', workspaceId: 'w-1', actions: [] }}>
          <OpenDesignProvider open={() => design}>
            <main id="main" tabIndex={-1} />
            <FindAnywhere />
            <Address />
          </OpenDesignProvider>
        </DesignPlaceProvider>
      </MemoryRouter>
    </QueryClientProvider>,
  );
  return { design, user: userEvent.setup(), address: () => screen.getByRole('status').textContent };
};

afterEach(() => act(() => clearDesk()));

it('goes to another page of the design by key and name, but not to the one that is open', async () => {
  const { user, address } = onPage('/designs/d-1/segments/');
  await user.keyboard('/');
  expect(screen.queryByRole('option', { name: /^Page ?Segments/ })).toBeNull();
  expect(screen.getByRole('option', { name: /^Page ?Checks/ })).toBeVisible();
  await user.keyboard('numb{Enter}');
  await expect.poll(address).toBe('/designs/d-1/numbering');
  expect(screen.queryByRole('dialog')).toBeNull();
});

it('goes to another design of the workspace', async () => {
  const { user, address } = onPage('/designs/d-1/checks');
  await user.keyboard('{Control>}k{/Control}');
  await user.click(await screen.findByRole('option', { name: /Ring terminals/ }));
  await expect.poll(address).toBe('/designs/d-2');
});

it('shows an element on the sheet, selected', async () => {
  const { user, address, design } = onPage('/designs/d-1/segments');
  await user.keyboard('/');
  await user.keyboard('fw-s1{Enter}');
  await expect.poll(address).toBe('/designs/d-1');
  expect(design.store.getState().selection).toEqual([{ collection: 'devices', id: 'fw-s1' }]);
});

it('does what the open page offers, and lets it show its elements itself', async () => {
  const { user, address } = onPage('/designs/d-1');
  const done: (string | ElementRef)[] = [];
  act(() =>
    offerCommands({
      commands: [{ name: 'Fit the sheet', kind: 'Sheet', detail: '0', run: () => done.push('fit') }],
      goTo: (ref) => done.push(ref),
    }),
  );
  await user.keyboard('/');
  await user.keyboard('fit the{Enter}');
  await expect.poll(() => done).toEqual(['fit']);
  await user.keyboard('/');
  await user.keyboard('fw-s1{Enter}');
  expect(done).toEqual(['fit', { collection: 'devices', id: 'fw-s1' }]);
  expect(address()).toBe('/designs/d-1');
});

it('lists the keys on every page', async () => {
  const { user } = onPage('/designs/d-1/numbering');
  await user.keyboard('?');
  expect(await screen.findByRole('dialog', { name: 'Keys of the sheet' })).toBeVisible();
});
