import { vi } from 'vitest';
import type { DesignSummary, Engagement } from '#contract/designs.ts';
import type { ErrorCode } from '#contract/errors.ts';
import { actions, type Action, type Role, type Session } from '#contract/session.ts';

export interface Asked {
  readonly method: string;
  /** With what follows the '?'. */
  readonly path: string;
  readonly body: unknown;
  readonly headers: Headers;
}

type Answer = (asked: Asked) => Response | Promise<Response>;

/** A server for a page under test: answers by 'METHOD /path' (without what follows the '?') and remembers what was asked. */
export function fakeApi(answers: Readonly<Record<string, Answer>>): { readonly asked: readonly Asked[] } {
  const asked: Asked[] = [];
  vi.stubGlobal('fetch', async (path: string, init: RequestInit = {}) => {
    const body: unknown = typeof init.body === 'string' ? JSON.parse(init.body) : undefined;
    const request: Asked = { method: init.method ?? 'GET', path, body, headers: new Headers(init.headers) };
    asked.push(request);
    const answer = answers[`${request.method} ${path.split('?')[0]}`];
    if (answer === undefined) throw new Error(`nothing answers ${request.method} ${path}`);
    return answer(request);
  });
  return { asked };
}

export const json =
  (body: unknown, status = 200): Answer =>
  () =>
    Response.json(body, { status });

export const nothing: Answer = () => new Response(null, { status: 204 });

export const refusal = (
  status: number,
  code: ErrorCode,
  more: { readonly message?: string; readonly details?: unknown; readonly retryAfterSeconds?: number } = {},
): Answer => json({ code, message: 'refused', requestId: 'r-1', ...more }, status);

const demo: Session['demo'] = [
  { role: 'owner', name: 'Mara Tadese', email: 'm.tadese@ternwick.example' },
  { role: 'architect', name: 'Rosa Halloran', email: 'r.halloran@ternwick.example' },
];

export const strangerSession: Session = {
  person: null,
  secondStepAsked: false,
  memberships: [],
  csrfToken: 'token-0',
  demo,
};

export function sessionOf(role: Role, may: readonly Action[] = actions): Session {
  return {
    person: { id: 'p-1', name: 'Rosa Halloran', email: 'r.halloran@ternwick.example', initials: 'RH' },
    secondStepAsked: false,
    memberships: [
      {
        workspaceId: 'w-1',
        workspaceName: 'Ternwick Net',
        role,
        actions: [...may],
        needsSecondStep: false,
      },
    ],
    csrfToken: 'token-1',
    demo,
  };
}

export function designSummary(changes: Partial<DesignSummary> = {}): DesignSummary {
  return {
    id: 'd-1',
    engagementId: 'e-1',
    title: 'Terminals stretch, phase 1',
    identification: 'SMF-L2-004',
    revision: 'C',
    state: 'draft',
    counts: { blocking: 0, degrading: 0, advisory: 0 },
    sequence: 7,
    changedAt: new Date(Date.now() - 4 * 60_000).toISOString(),
    changedBy: 'Rosa Halloran',
    archivedAt: null,
    deletedAt: null,
    issued: null,
    ...changes,
  };
}

export function engagement(changes: Partial<Engagement> = {}): Engagement {
  return {
    id: 'e-1',
    workspaceId: 'w-1',
    name: 'Saltmarsh Ferries',
    summary: 'Head office, Gullhaven, Orrin Point, Skerry',
    archivedAt: null,
    designs: [designSummary()],
    ...changes,
  };
}
