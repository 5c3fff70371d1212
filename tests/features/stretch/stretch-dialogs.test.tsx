import { act, fireEvent, render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { beforeEach, describe, expect, test, vi } from 'vitest';
import { emptyDesign, type Design } from '#engine/model/design.ts';
import { applyPatch } from '#engine/model/merge-patch.ts';
import { runRules } from '#engine/rules/run-rules.ts';
import { stretch } from '#engine/stretch/stretch.ts';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import { keptForm } from '../../../src/features/stretch/kept-form.ts';
import { previewOf, type PreviewRequest } from '../../../src/features/stretch/preview.ts';
import { StretchDialogs } from '../../../src/features/stretch/stretch-dialogs.tsx';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { DesignPlaceProvider } from '../../../src/workspace/design-place.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';
import { formOf, stemIds } from '../../support/stretch-forms.ts';

interface Run {
  ended: boolean;
  readonly finish: () => void;
}
const worker = vi.hoisted(() => ({ runs: [] as Run[] }));
// jsdom has no workers: this one does the same work once the test lets it.
vi.mock('../../../src/features/stretch/start-preview-worker.ts', () => ({
  startPreviewWorker: () => {
    let run: Run | undefined;
    const self = {
      onmessage: undefined as ((event: { readonly data: unknown }) => void) | undefined,
      postMessage: (request: PreviewRequest) => {
        const { form, design, numbering } = structuredClone(request);
        run = {
          ended: false,
          finish: () =>
            self.onmessage?.({ data: { result: structuredClone(previewOf({ form, design, numbering })) } }),
        };
        worker.runs.push(run);
        self.onmessage?.({ data: { progress: { done: 1, total: 4 } } });
      },
      terminate: () => {
        if (run !== undefined) run.ended = true;
      },
    };
    return self;
  },
}));

const place = { designId: 'd1', workspaceId: 'w1', actions: [] };
const empty: Design = { ...emptyDesign('Stretch'), meta: { title: 'Stretch', example: true } };

const renderAt = (address: string, document: Design = empty) => {
  const design = openInMemory(document, true);
  const page = (
    <OpenDesignProvider open={() => design}>
      <ChecksProvider>
        <DesignPlaceProvider place={place}>
          <StretchDialogs />
        </DesignPlaceProvider>
      </ChecksProvider>
    </OpenDesignProvider>
  );
  const router = createMemoryRouter([{ path: '*', element: page }], { initialEntries: [address] });
  const { unmount } = render(
    <TooltipProvider>
      <RouterProvider router={router} />
      <ToastRegion />
    </TooltipProvider>,
  );
  return {
    design,
    unmount,
    user: userEvent.setup(),
    document: (): Design => design.store.getState().document,
    address: (): string => router.state.location.search,
  };
};

beforeEach(() => {
  sessionStorage.clear();
  worker.runs.length = 0;
});

describe('the Stretch form', () => {
  test('begins with a pair, drawn and checked, and puts it on the sheet as one step that can be undone', async () => {
    const { user, document, design, address } = renderAt('/?stretch=Form');
    const dialog = await screen.findByRole('dialog', { name: 'Stretch' });
    expect(within(dialog).getByRole('img', { name: /2 sites, 1 tunnel, 1 association/ })).toBeVisible();
    expect(within(dialog).getByText(/^All \d+ checks pass$/)).toBeVisible();
    await user.click(within(dialog).getByRole('button', { name: 'Put it on the sheet' }));
    await waitFor(() => expect(address()).toBe(''));
    expect(Object.keys(document().sites)).toHaveLength(2);
    expect(Object.keys(document().layout.devices ?? {})).toHaveLength(Object.keys(document().devices).length);
    expect(runRules(document())).toEqual([]);
    design.undo();
    expect(document()).toEqual(empty);
  });

  test('says what stands in the way in the field’s own words, and offers nothing until it is mended', async () => {
    const { user } = renderAt('/?stretch=Form');
    const dialog = await screen.findByRole('dialog', { name: 'Stretch' });
    await user.click(within(dialog).getByRole('radio', { name: 'Bare' }));
    expect(
      await within(dialog).findByText(/IPsec: no\. Expected yes: Internet access is not trusted\./),
    ).toBeVisible();
    expect(within(dialog).getByText('One field stands in the way.')).toBeVisible();
    expect(within(dialog).getByRole('button', { name: 'Put it on the sheet' })).toBeDisabled();
    await user.click(within(dialog).getByRole('checkbox', { name: 'Trusted' }));
    expect(await within(dialog).findByText(/^All \d+ checks pass$/)).toBeVisible();
  });

  test('draws a plan of many sites in a worker, each change ending the run before', async () => {
    const { user } = renderAt('/?stretch=Form');
    const dialog = await screen.findByRole('dialog', { name: 'Stretch' });
    expect(worker.runs).toEqual([]);
    await user.click(within(dialog).getByRole('button', { name: 'Add by names…' }));
    const names = within(dialog).getByRole('textbox', { name: 'Names, one on each line' });
    const add = (count: number, stem: string): void => {
      const value = Array.from({ length: count }, (_, i) => `${stem} ${i + 1}`).join('\n');
      fireEvent.change(names, { target: { value } });
      fireEvent.blur(names);
    };
    add(17, 'Pier');
    await waitFor(() => expect(worker.runs).toHaveLength(1));
    expect(within(dialog).getByText('Laying out…')).toBeVisible();
    expect(within(dialog).getByRole('button', { name: 'Put it on the sheet' })).toBeDisabled();
    add(1, 'Jetty');
    await waitFor(() => expect(worker.runs).toHaveLength(2));
    expect(worker.runs[0]!.ended).toBe(true);
    act(() => worker.runs[1]!.finish());
    expect(await within(dialog).findByRole('img', { name: /18 sites/ })).toBeVisible();
    expect(within(dialog).getByRole('button', { name: 'Put it on the sheet' })).toBeEnabled();
  });

  test('adds sites by their names, and keeps what was filled in while the tab lives', async () => {
    const first = renderAt('/?stretch=Form');
    const dialog = await screen.findByRole('dialog', { name: 'Stretch' });
    await first.user.click(within(dialog).getByRole('button', { name: 'Add by names…' }));
    const names = within(dialog).getByRole('textbox', { name: 'Names, one on each line' });
    fireEvent.change(names, { target: { value: 'Gullhaven\n\nOrrin Point\nSkerry' } });
    fireEvent.blur(names);
    expect(await within(dialog).findByText('Sites (3)')).toBeVisible();
    expect(within(dialog).queryByDisplayValue(/^Site \d/)).toBeNull();
    expect(within(dialog).getByLabelText('VLAN of Segment 1')).toBeVisible();
    expect(within(dialog).getByRole('radio', { name: 'Hub' })).toBeChecked();
    await first.user.click(within(dialog).getByRole('button', { name: 'Cancel' }));
    first.unmount();

    const again = renderAt('/?stretch=Form');
    expect(await screen.findByText('Sites (3)')).toBeVisible();
    expect(screen.getByDisplayValue('Orrin Point')).toBeVisible();
    await again.user.click(screen.getByRole('button', { name: 'Start over' }));
    expect(await screen.findByText('Sites (2)')).toBeVisible();
  });
});

describe('a form that was left', () => {
  const bag = (form: unknown) => sessionStorage.setItem('longpatch.stretch.d1', JSON.stringify(form));

  test('comes back with what was half typed, and with nothing of what is no form', () => {
    const half = formOf(3, { domain: 'not a domain' });
    bag({ ...half, sites: half.sites.map((site, i) => (i === 1 ? { ...site, name: '' } : site)) });
    expect(keptForm('d1')?.sites[1]!.name).toBe('');
    bag({ ...half, sites: [{ name: 'Gullhaven' }] });
    expect(keptForm('d1')).toBeUndefined();
    sessionStorage.setItem('longpatch.stretch.d1', '{');
    expect(keptForm('d1')).toBeUndefined();
    expect(keptForm('d2')).toBeUndefined();
  });
});

describe('Stretch to another site', () => {
  const hub = (): Design => {
    const answer = stretch(formOf(3), { design: empty, newId: stemIds });
    if (!answer.ok) throw new Error('refused');
    return applyPatch(empty, answer.patch);
  };

  test('joins a new site to the hub, and selects it', async () => {
    const { user, document, design } = renderAt('/?stretch=a', hub());
    const dialog = await screen.findByRole('dialog', { name: 'Stretch Ticketing to another site' });
    expect(within(dialog).getByText('Head office, the hub')).toBeVisible();
    expect(within(dialog).getByRole('button', { name: 'Stretch it' })).toBeDisabled();
    await user.type(within(dialog).getByRole('textbox', { name: 'Name' }), 'Fennel Quay{Tab}');
    expect(await within(dialog).findByText('Adds 1 site, 1 tunnel, 1 association.')).toBeVisible();
    await user.click(within(dialog).getByRole('button', { name: 'Stretch it' }));
    await waitFor(() => expect(screen.queryByRole('dialog')).toBeNull());
    const made = Object.entries(document().sites).find(([, { name }]) => name === 'Fennel Quay')!;
    expect(document().segments['a']!.sites).toHaveProperty(made[0]);
    expect(design.store.getState().selection).toEqual([{ collection: 'sites', id: made[0] }]);
    expect(runRules(document())).toEqual([]);
  });

  test('asks before it lowers packets that no longer fit', async () => {
    const { user } = renderAt('/?stretch=a', hub());
    const dialog = await screen.findByRole('dialog', { name: 'Stretch Ticketing to another site' });
    await user.type(within(dialog).getByRole('textbox', { name: 'Name' }), 'Fennel Quay{Tab}');
    await user.selectOptions(within(dialog).getByRole('combobox', { name: 'Reached by' }), 'behind NAT');
    expect(
      await within(dialog).findByText(/Expected yes, which lowers Ticketing and its hosts/),
    ).toBeVisible();
    await user.click(within(dialog).getByRole('checkbox', { name: /^Lower Ticketing/ }));
    expect(within(dialog).getByRole('button', { name: 'Stretch it' })).toBeEnabled();
  });

  test('opens for no segment that is not there', () => {
    renderAt('/?stretch=z', hub());
    expect(screen.queryByRole('dialog')).toBeNull();
  });
});
