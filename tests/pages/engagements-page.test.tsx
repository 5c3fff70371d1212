import { screen, waitFor, within } from '@testing-library/react';
import { describe, expect, test, vi } from 'vitest';
import type { Engagement } from '#contract/designs.ts';
import type { Action } from '#contract/session.ts';
import { designSummary, engagement, fakeApi, json, refusal, sessionOf } from '../support/fake-api.ts';
import { renderRoute } from '../support/render-route.tsx';

// The sheet has tests of its own; here it only matters that it is gone to.
vi.mock('../../src/pages/sheet-page.tsx', () => ({ SheetPage: () => null }));

const path = '/workspaces/w-1/engagements';
const ferries = engagement({
  designs: [
    designSummary({ counts: { blocking: 3, degrading: 1, advisory: 0 } }),
    designSummary({
      id: 'd-2',
      title: 'CCTV over Coastal access',
      identification: null,
      revision: null,
      state: 'in-review',
    }),
  ],
});

function workspaceApi(
  engagements: readonly Engagement[],
  may?: readonly Action[],
  answers: Parameters<typeof fakeApi>[0] = {},
) {
  return fakeApi({
    'GET /api/session': json(sessionOf('architect', may)),
    [`GET /api${path}`]: json({ engagements }),
    ...answers,
  });
}
const ready = () => screen.findByRole('heading', { level: 2, name: 'Saltmarsh Ferries' });
const card = (title: string): HTMLElement => {
  const found = screen.getByRole('heading', { level: 3, name: title }).closest('article');
  if (found === null) throw new Error(`no card has the title ${title}`);
  return found;
};

describe('a card', () => {
  test('tells title, number, revision, age, state and what is open, and leads to the sheet', async () => {
    workspaceApi([ferries]);
    renderRoute(path);
    await ready();
    const first = within(card('Terminals stretch, phase 1'));
    expect(first.getByRole('link')).toHaveAttribute('href', '/designs/d-1');
    expect(first.getByText('SMF-L2-004, C')).toBeVisible();
    expect(first.getByText('4 min ago')).toHaveAttribute(
      'title',
      expect.stringContaining('by Rosa Halloran'),
    );
    expect(first.getByText('Draft')).toBeVisible();
    expect(card('Terminals stretch, phase 1')).toHaveTextContent('3 blocking1 degrading');
    const second = within(card('CCTV over Coastal access'));
    expect(second.getByText('No number yet')).toBeVisible();
    expect(second.getByText('clear')).toBeVisible();
  });

  test('has a picture of its own version in the reader’s theme', async () => {
    workspaceApi([ferries]);
    renderRoute(path);
    await ready();
    const picture = card('Terminals stretch, phase 1').querySelector('img');
    expect(picture).toHaveAttribute('src', '/api/designs/d-1/thumbnail?v=7&open=3&theme=paper');
    expect(picture).toHaveAttribute('alt', '');
  });

  test('of a reader who may not open designs leads nowhere and asks for no picture', async () => {
    workspaceApi([ferries], ['workspace.read']);
    renderRoute(path);
    await ready();
    const first = card('Terminals stretch, phase 1');
    expect(within(first).queryByRole('link')).not.toBeInTheDocument();
    expect(within(first).queryByRole('button')).not.toBeInTheDocument();
    expect(first.querySelector('img')).toBeNull();
  });
});

test('the column at the right tells where blocking findings wait', async () => {
  workspaceApi([ferries]);
  renderRoute(path);
  await ready();
  const waiting = within(screen.getByRole('complementary', { name: 'Faults waiting' }));
  expect(waiting.getByText('3 blocking')).toBeVisible();
  expect(waiting.getByRole('link')).toHaveAttribute('href', '/designs/d-1');
  expect(waiting.getByText(/^Times are yours: /)).toBeVisible();
});

test('a state is chosen into the address, and what was chosen there is shown', async () => {
  workspaceApi([ferries]);
  const { user, address } = renderRoute(`${path}?state=in-review`);
  await ready();
  expect(screen.getByRole('radio', { name: 'In review 1' })).toBeChecked();
  expect(screen.queryByText('Terminals stretch, phase 1', { selector: 'h3 a' })).not.toBeInTheDocument();
  await user.click(screen.getByRole('radio', { name: 'All 2' }));
  expect(card('Terminals stretch, phase 1')).toBeVisible();
  expect(address()).toBe(path);
});

test('words that fit nothing say so, and one press shows all again', async () => {
  workspaceApi([ferries]);
  const { user, address } = renderRoute(`${path}?state=in-review&archived=1`);
  await ready();
  await user.type(screen.getAllByLabelText('Design or number')[0] ?? document.body, 'toaster');
  expect(address()).toBe(`${path}?state=in-review&archived=1&q=toaster`);
  expect(screen.getByText('Nothing fits')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'Show all designs' }));
  expect(address()).toBe(`${path}?archived=1`);
  expect(card('Terminals stretch, phase 1')).toBeVisible();
});

test('archived ones are asked for on request only', async () => {
  const { asked } = workspaceApi([ferries]);
  const { user } = renderRoute(path);
  await ready();
  await user.click(screen.getByLabelText('Show archived'));
  await waitFor(() => expect(asked.at(-1)?.path).toBe(`/api${path}?archived=true`));
  expect(asked.map((request) => request.path)).toContain(`/api${path}?archived=false`);
});

describe('a workspace without engagements', () => {
  test('teaches who may make one, and takes them there', async () => {
    const { asked } = workspaceApi([], undefined, {
      [`POST /api${path}`]: json(engagement({ designs: [] }), 201),
    });
    const { user } = renderRoute(path);
    await screen.findByText('No engagement yet');
    const [, inTheMiddle] = screen.getAllByRole('button', { name: 'New engagement' });
    await user.click(inTheMiddle ?? document.body);
    await user.click(screen.getByRole('button', { name: 'Create' }));
    expect(screen.getByLabelText('Name')).toHaveAccessibleDescription(
      'Name is empty. Type at least one character.',
    );
    await user.type(screen.getByLabelText('Name'), '  Saltmarsh Ferries ');
    await user.click(screen.getByRole('button', { name: 'Create' }));
    await waitFor(() => expect(screen.queryByRole('dialog')).not.toBeInTheDocument());
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
      name: 'Saltmarsh Ferries',
      summary: '',
    });
  });

  test('tells everybody else whom to ask', async () => {
    workspaceApi([], ['workspace.read', 'design.read']);
    renderRoute(path);
    expect(await screen.findByText(/An owner or an architect/)).toBeVisible();
    expect(screen.queryByRole('button', { name: /New/ })).not.toBeInTheDocument();
  });
});

test('a list that cannot be read says why and can be tried again', async () => {
  workspaceApi([ferries], undefined, {
    [`GET /api${path}`]: refusal(503, 'unavailable', { message: 'The database is away.' }),
  });
  const { user } = renderRoute(path);
  expect(await screen.findByRole('alert')).toHaveTextContent(
    'The engagements could not be read. The database is away.',
  );
  workspaceApi([ferries]);
  await user.click(screen.getByRole('button', { name: 'Try again' }));
  await ready();
  expect(screen.queryByRole('alert')).not.toBeInTheDocument();
});

test('a workspace that the reader is not in is no page', async () => {
  workspaceApi([ferries]);
  renderRoute('/workspaces/w-9/engagements');
  expect(await screen.findByText('Nothing is plugged in here')).toBeVisible();
});

describe('a new design', () => {
  const created = json(designSummary({ id: 'd-9' }), 201);

  test.each([
    ['Empty sheet', { kind: 'empty' }, ''],
    ['Demo', { kind: 'demo', demo: 'fault-free' }, 'Terminals stretch, phase 1'],
  ])('begins with: %s', async (choice, from, suggested) => {
    const { asked } = workspaceApi([ferries], undefined, { 'POST /api/engagements/e-1/designs': created });
    const { user, address } = renderRoute(path);
    await ready();
    await user.click(screen.getAllByRole('button', { name: 'New design' })[0] ?? document.body);
    await user.click(screen.getByRole('radio', { name: choice }));
    expect(screen.getByLabelText('Title')).toHaveValue(suggested);
    await user.clear(screen.getByLabelText('Title'));
    await user.type(screen.getByLabelText('Title'), 'Phase 2{Enter}');
    await waitFor(() => expect(address()).toBe('/designs/d-9'));
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({ title: 'Phase 2', from });
  });

  test('as a copy is asked for from the card, with a title that says so', async () => {
    const { asked } = workspaceApi([ferries], undefined, { 'POST /api/engagements/e-1/designs': created });
    const { user, address } = renderRoute(path);
    await ready();
    await user.click(screen.getByRole('button', { name: 'What to do with CCTV over Coastal access' }));
    await user.click(screen.getByRole('menuitem', { name: 'Copy…' }));
    expect(await screen.findByLabelText('Title')).toHaveValue('CCTV over Coastal access, copy');
    await user.click(screen.getByRole('button', { name: 'Create and open' }));
    await waitFor(() => expect(address()).toBe('/designs/d-9'));
    expect(asked.find(({ method }) => method === 'POST')?.body).toEqual({
      title: 'CCTV over Coastal access, copy',
      from: { kind: 'copy', designId: 'd-2' },
    });
  });

  test('from a file that is no design shows everything that is wrong in it', async () => {
    const details = [
      { path: 'tunnels/tn-1/a/vni', value: '20000000', expected: 'expected a VNI from 0 to 16777215' },
      { path: 'devices/fw-1/kind', value: '"toaster"', expected: 'expected one of firewall, switch' },
    ];
    workspaceApi([ferries], undefined, {
      'POST /api/engagements/e-1/designs': refusal(422, 'invalid-design', { details }),
    });
    const { user } = renderRoute(path);
    await ready();
    await user.click(screen.getAllByRole('button', { name: 'New design' })[0] ?? document.body);
    await user.click(screen.getByRole('radio', { name: 'File' }));
    await user.upload(
      screen.getByLabelText(/own file/),
      new File(['{"meta":{"title":"Lab"}}'], 'lab.json', { type: 'application/json' }),
    );
    await waitFor(() => expect(screen.getByLabelText('Title')).toHaveValue('Lab'));
    await user.click(screen.getByRole('button', { name: 'Create and open' }));
    const problems = within(await screen.findByRole('list', { name: 'What needs mending' })).getAllByRole(
      'listitem',
    );
    expect(problems.map((problem) => problem.textContent)).toEqual([
      'tunnels/tn-1/a/vni20000000: expected a VNI from 0 to 16777215',
      'devices/fw-1/kind"toaster": expected one of firewall, switch',
    ]);
  });

  test('without a title, or without what it begins with, is not asked for', async () => {
    const { asked } = workspaceApi([ferries]);
    const { user } = renderRoute(path);
    await ready();
    await user.click(screen.getAllByRole('button', { name: 'New design' })[0] ?? document.body);
    await user.click(screen.getByRole('radio', { name: 'File' }));
    await user.click(screen.getByRole('button', { name: 'Create and open' }));
    expect(screen.getByLabelText('Title')).toBeInvalid();
    expect(screen.getByLabelText(/own file/)).toHaveAccessibleDescription(/No file is chosen/);
    expect(asked.some(({ method }) => method === 'POST')).toBe(false);
  });

  test('is offered only to readers who may make one', async () => {
    workspaceApi([ferries], ['workspace.read', 'design.read']);
    renderRoute(path);
    await ready();
    expect(screen.queryByRole('button', { name: /New design|What to do/ })).not.toBeInTheDocument();
  });
});

test('a design is renamed, and the dialog gives the focus back to the menu it came from', async () => {
  const { asked } = workspaceApi([ferries], undefined, { 'PATCH /api/designs/d-1': json(designSummary()) });
  const { user } = renderRoute(path);
  await ready();
  await user.click(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' }));
  await user.click(screen.getByRole('menuitem', { name: 'Rename…' }));
  const title = await screen.findByLabelText('Title');
  expect(title).toHaveFocus();
  await user.clear(title);
  await user.type(title, 'Phase one{Enter}');
  await waitFor(() => expect(screen.queryByRole('dialog')).not.toBeInTheDocument());
  expect(asked.find(({ method }) => method === 'PATCH')?.body).toEqual({ title: 'Phase one' });
  await waitFor(() =>
    expect(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' })).toHaveFocus(),
  );
});

test('archiving is done at once and can be undone', async () => {
  const { asked } = workspaceApi([ferries], undefined, { 'PATCH /api/designs/d-1': json(designSummary()) });
  const { user } = renderRoute(path);
  await ready();
  await user.click(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' }));
  await user.click(screen.getByRole('menuitem', { name: 'Archive' }));
  await user.click(await screen.findByRole('button', { name: 'Undo' }));
  await waitFor(() =>
    expect(asked.filter(({ method }) => method === 'PATCH').map(({ body }) => body)).toEqual([
      { archived: true },
      { archived: false },
    ]),
  );
});

test('when an archived design leaves the list, the keyboard goes on from the start of the page', async () => {
  let engagements = [ferries];
  workspaceApi([], undefined, {
    [`GET /api${path}`]: () => Response.json({ engagements }),
    'PATCH /api/designs/d-1': () => {
      engagements = [{ ...ferries, designs: ferries.designs.slice(1) }];
      return Response.json(designSummary());
    },
  });
  const { user } = renderRoute(path);
  await ready();
  await user.click(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' }));
  await user.click(screen.getByRole('menuitem', { name: 'Archive' }));
  await waitFor(() => expect(screen.getByRole('main')).toHaveFocus());
});

test('an archived design offers its way back and its end, and nothing that would change it', async () => {
  const archived = engagement({ designs: [designSummary({ archivedAt: '2026-01-01T00:00:00.000Z' })] });
  workspaceApi([archived], ['workspace.read', 'design.read', 'design.edit', 'design.archive']);
  const { user } = renderRoute(`${path}?archived=1`);
  await ready();
  expect(within(card('Terminals stretch, phase 1')).getByText('Archived')).toBeVisible();
  await user.click(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' }));
  expect(screen.getAllByRole('menuitem').map((item) => item.textContent)).toEqual(['Restore', 'Delete']);
});

test('a design is deleted at once, says for how long it can come back, and comes back on Undo', async () => {
  const { asked } = workspaceApi([ferries], undefined, {
    'PATCH /api/designs/d-1': json(designSummary()),
  });
  const { user } = renderRoute(path);
  await ready();
  await user.click(screen.getByRole('button', { name: 'What to do with Terminals stretch, phase 1' }));
  await user.click(screen.getByRole('menuitem', { name: 'Delete' }));
  await screen.findByText(/is deleted\. It can be restored for 30 days/);
  // Earlier toasts may still stand above it.
  await user.click(screen.getAllByRole('button', { name: 'Undo' }).at(-1)!);
  await waitFor(() =>
    expect(asked.filter(({ method }) => method === 'PATCH').map(({ body }) => body)).toEqual([
      { deleted: true },
      { deleted: false },
    ]),
  );
});
