import { QueryClientProvider } from '@tanstack/react-query';
import { render, screen, waitFor, within } from '@testing-library/react';
import userEvent from '@testing-library/user-event';
import { MemoryRouter } from 'react-router-dom';
import { afterEach, describe, expect, test, vi } from 'vitest';
import type { Thread, WriteComment } from '#contract/comments.ts';
import { mentionToken } from '#contract/comments.ts';
import type { Action } from '#contract/session.ts';
import { inversePatch } from '#engine/model/merge-patch.ts';
import { GeometryProvider } from '../../../src/canvas/geometry-context.tsx';
import { ToastRegion } from '../../../src/components/toast.tsx';
import { TooltipProvider } from '../../../src/components/tooltip.tsx';
import { CommentsDesk } from '../../../src/features/review/comments-desk.tsx';
import { useCommenting } from '../../../src/features/review/use-commenting.tsx';
import { createQueryClient } from '../../../src/lib/query-client.ts';
import { sessionQuery } from '../../../src/lib/session.ts';
import { ChecksProvider } from '../../../src/workspace/checks-context.tsx';
import { DesignPlaceProvider } from '../../../src/workspace/design-place.tsx';
import { OpenDesignProvider } from '../../../src/workspace/open-design-context.tsx';
import { openInMemory } from '../../canvas/inspector/render-inspector.tsx';
import { pairDesign } from '../../support/designs.ts';
import { fakeApi, json, nothing, refusal, sessionOf } from '../../support/fake-api.ts';
import { comment, noor, rosa, thread } from './threads.ts';

afterEach(() => vi.unstubAllGlobals());

const design = pairDesign();
const tunnel = 'tn-s0-s1-a';
const ref = { collection: 'tunnels', id: tunnel } as const;
const { name } = design.tunnels[tunnel]!;

interface Options {
  readonly threads?: readonly Thread[];
  readonly actions?: readonly Action[];
  readonly query?: string;
  readonly editable?: boolean;
  readonly more?: Parameters<typeof fakeApi>[0];
}

const renderDesk = ({
  threads = [],
  actions = ['design.read', 'comment.write'],
  query = '',
  editable = false,
  more = {},
}: Options = {}) => {
  const session = {
    ...sessionOf('reviewer'),
    person: { id: noor.id, name: noor.name, email: 'n.okafor@ternwick.example', initials: 'NO' },
  };
  const api = fakeApi({
    'GET /api/session': json(session),
    'GET /api/designs/d-1/comments': json({ threads, members: [noor, rosa] }),
    'POST /api/designs/d-1/comments': json(thread(), 201),
    ...more,
  });
  const queryClient = createQueryClient();
  queryClient.setQueryData(sessionQuery.queryKey, session);
  const open = openInMemory(design, editable);
  const onShow = vi.fn<(pin: Thread['pin'], threadId: string) => void>();
  function Desk() {
    const { ask, dialog } = useCommenting(() => undefined);
    return (
      <>
        <CommentsDesk tools={{ onShow }} onCommentDesign={() => ask?.({ kind: 'design' })} />
        {dialog}
      </>
    );
  }
  render(
    <QueryClientProvider client={queryClient}>
      <TooltipProvider>
        <MemoryRouter initialEntries={[`/?${query}`]}>
          <DesignPlaceProvider place={{ designId: 'd-1', workspaceId: 'w-1', actions }}>
            <OpenDesignProvider open={() => open}>
              <ChecksProvider>
                <GeometryProvider>
                  <Desk />
                </GeometryProvider>
              </ChecksProvider>
            </OpenDesignProvider>
          </DesignPlaceProvider>
        </MemoryRouter>
        <ToastRegion />
      </TooltipProvider>
    </QueryClientProvider>,
  );
  const sent = (method: string) => api.asked.filter((asked) => asked.method === method);
  return { user: userEvent.setup(), open, onShow, sent };
};
const card = (about: string) => within(screen.getByRole('article', { name: `Thread on ${about}` }));

describe('writing', () => {
  test('a mention is chosen by keyboard and sent as the person, not the name', async () => {
    const { user, sent } = renderDesk();
    await user.click(await screen.findByRole('button', { name: 'Comment on the design…' }));
    const field = screen.getByRole('textbox', { name: 'Comment' });
    await user.type(field, 'See @');
    const list = screen.getByRole('listbox', { name: 'People to mention' });
    expect(within(list).getAllByRole('option')).toHaveLength(2);
    await user.type(field, '{ArrowDown}');
    expect(within(list).getByRole('option', { selected: true })).toHaveTextContent('Rosa Halloran');
    expect(field).toHaveAttribute(
      'aria-activedescendant',
      within(list).getByRole('option', { selected: true }).id,
    );
    await user.type(field, '{Escape}{Backspace}@ros{Enter}please');
    expect(field).toHaveValue('See @Rosa Halloran please');
    await user.keyboard('{Control>}{Enter}{/Control}');
    await waitFor(() => expect(sent('POST')).toHaveLength(1));
    expect(sent('POST')[0]!.body).toEqual({
      body: `See ${mentionToken(rosa.id)} please`,
      pin: { kind: 'design' },
    } satisfies WriteComment);
    await waitFor(() => expect(screen.queryByRole('dialog')).not.toBeInTheDocument());
  });

  test('nothing, and what looks like a key, is held back with the way out', async () => {
    const { user, sent } = renderDesk();
    await user.click(await screen.findByRole('button', { name: 'Comment on the design…' }));
    await user.click(screen.getByRole('button', { name: 'Comment' }));
    expect(screen.getByText(/There are no words yet/)).toBeInTheDocument();
    await user.type(screen.getByRole('textbox', { name: 'Comment' }), 'PSK: hT7kq92LmZ');
    await user.click(screen.getByRole('button', { name: 'Comment' }));
    expect(screen.getByText(/write the name under which your vault keeps it/)).toBeInTheDocument();
    expect(sent('POST')).toEqual([]);
  });

  test('what the server refuses is said where it was written, and nothing is lost', async () => {
    const { user } = renderDesk({
      threads: [thread()],
      more: {
        'POST /api/designs/d-1/comments': refusal(409, 'conflict', { message: 'The thread is resolved.' }),
      },
    });
    await user.click(await screen.findByRole('button', { name: 'Reply' }));
    await user.type(screen.getByRole('textbox', { name: 'Reply' }), 'But');
    await user.click(screen.getByRole('button', { name: 'Reply' }));
    expect(await screen.findByText('The thread is resolved.')).toBeInTheDocument();
    expect(screen.getByRole('textbox', { name: 'Reply' })).toHaveValue('But');
  });

  test('readers who may not comment see threads and no way to write', async () => {
    renderDesk({ threads: [thread()], actions: ['design.read'] });
    expect(await screen.findByText('Why this VNI?')).toBeInTheDocument();
    expect(
      screen.queryByRole('button', { name: /Reply|Resolve|Comment on the design/ }),
    ).not.toBeInTheDocument();
  });
});

describe('a thread', () => {
  const onTunnel = thread({
    id: 't-2',
    pin: { kind: 'element', ref, path: ['b', 'vni'], called: 'old name' },
    comments: [comment({ id: 'c-2' }), comment({ id: 'c-3', body: 'An oversight.', author: rosa })],
  });

  test('says what it is about as that is called now, where that is, and leads there', async () => {
    const { user, onShow } = renderDesk({ threads: [onTunnel] });
    await screen.findByText('An oversight.');
    const about = card(`Tunnel ${name}`);
    expect(about.getByRole('heading', { level: 3 })).toHaveTextContent(/End B: VNI/i);
    expect(about.getByText(/^at [A-H][1-9]/)).toBeInTheDocument();
    await user.click(about.getByRole('button', { name: 'Show' }));
    expect(onShow).toHaveBeenCalledWith(onTunnel.pin, 't-2');
  });

  test('on what is gone stays with what that was called', async () => {
    renderDesk({
      threads: [{ ...onTunnel, pin: { ...onTunnel.pin, ref: { ...ref, id: 'gone' } } as never }],
    });
    await screen.findByText('An oversight.');
    const about = card('Element old name');
    expect(about.getByText('(no longer in the design)')).toBeInTheDocument();
    expect(about.queryByRole('button', { name: 'Show' })).not.toBeInTheDocument();
  });

  test('is resolved by a press; one’s own comment is deleted after a question', async () => {
    const { user, sent } = renderDesk({
      threads: [onTunnel],
      more: {
        'POST /api/comments/t-2/resolution': json({ ...onTunnel, resolvedAt: new Date().toISOString() }),
        'DELETE /api/comments/c-2': nothing,
      },
    });
    await user.click(await screen.findByRole('button', { name: 'Resolve' }));
    await waitFor(() => expect(sent('POST')).toHaveLength(1));
    const menus = screen.getAllByRole('button', { name: 'What can be done with your comment' });
    expect(menus).toHaveLength(1);
    await user.click(menus[0]!);
    await user.click(screen.getByRole('menuitem', { name: 'Delete…' }));
    expect(sent('DELETE')).toEqual([]);
    await user.click(await screen.findByRole('button', { name: 'Delete' }));
    await waitFor(() => expect(sent('DELETE')).toHaveLength(1));
  });

  test('that a link leads to is shown and has the focus, though the filter would hide it', async () => {
    renderDesk({
      threads: [thread({ resolvedAt: new Date().toISOString() })],
      query: 'thread=t-1',
    });
    await waitFor(() => expect(screen.getByRole('article')).toHaveFocus());
  });
});

describe('a suggestion', () => {
  const patch = { tunnels: { [tunnel]: { b: { vni: 777 } } } };
  const suggestion = {
    patch,
    before: inversePatch(design, patch),
    baseSequence: 0,
    appliedBy: null,
    appliedAt: null,
    appliedSequence: null,
  };
  const suggested = thread({ comments: [comment({ suggestion })] });

  test('is offered to who edits, and applied in one press as a step of theirs', async () => {
    const { user, open, sent } = renderDesk({
      threads: [suggested],
      editable: true,
      more: { 'POST /api/comments/c-1/application': json({ thread: suggested, sequence: 1 }) },
    });
    await user.click(await screen.findByRole('button', { name: 'Apply' }));
    await waitFor(() => expect(sent('POST')).toHaveLength(1));
    expect(sent('POST')[0]!.body).toEqual({ editId: expect.any(String) as string });
    await waitFor(() =>
      expect(open.store.getState().history.done.map(({ label }) => label)).toEqual(['Apply a suggestion']),
    );
  });

  test('that no longer fits says where, and asks before it is applied', async () => {
    const { user, open, sent } = renderDesk({
      threads: [suggested],
      editable: true,
      more: { 'POST /api/comments/c-1/application': json({ thread: suggested, sequence: 2 }) },
    });
    open.commit('Set the VNI', { tunnels: { [tunnel]: { b: { vni: 778 } } } });
    await user.click(await screen.findByRole('button', { name: 'Apply all the same…' }));
    const dialog = within(screen.getByRole('dialog'));
    expect(dialog.getByText(/→ 778/)).toBeInTheDocument();
    expect(sent('POST')).toEqual([]);
    await user.click(dialog.getByRole('button', { name: 'Apply all the same' }));
    await waitFor(() => expect(sent('POST')).toHaveLength(1));
    expect(sent('POST')[0]!.body).toMatchObject({ confirmed: true });
  });

  test('is told to others, with nothing to press', async () => {
    renderDesk({ threads: [suggested] });
    expect(await screen.findByText(/→ 777/)).toBeInTheDocument();
    expect(screen.queryByRole('button', { name: 'Apply' })).not.toBeInTheDocument();
  });
});
