import { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { Router } from 'express';
import { deleteWorkspaceSchema } from '#contract/workspace-export.ts';
import { changeMemberSchema, changeWorkspaceSchema, createWorkspaceSchema } from '#contract/workspaces.ts';
import { requirePerson } from '../auth/sessions.ts';
import type { Throttles } from '../auth/throttles.ts';
import { jsonBody } from '../middleware/json-body.ts';
import type { Context } from '../services/context.ts';
import { limits } from '../services/limits.ts';
import { changeRole, readPeople, removePerson } from '../services/people.ts';
import { deleteWorkspace } from '../services/workspace-deletion.ts';
import { exportWorkspace } from '../services/workspace-export.ts';
import { changeSettings, readMemberships, readSettings, startWorkspace } from '../services/workspaces.ts';
import { mountRoute } from './mount-route.ts';
import { readBody, readId } from './read-request.ts';

/** Workspaces and who is in them. */
export function workspaceRoutes(context: Context, throttles: Throttles): Router {
  const router = Router();
  const body = jsonBody(limits.bodyBytes);

  mountRoute(router, 'GET /api/workspaces', async (req, res) => {
    res.json({ workspaces: await readMemberships(context, requirePerson(req).id) });
  });

  mountRoute(router, 'POST /api/workspaces', ...body, async (req, res) => {
    const person = requirePerson(req);
    const { name } = readBody(req, createWorkspaceSchema);
    await throttles.workspaceStart(person.id);
    res.status(201).json(await startWorkspace(context, person.id, name));
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId', async (req, res) => {
    const person = requirePerson(req);
    res.json(await readSettings(context, person.id, readId(req, 'workspaceId', 'workspace')));
  });

  mountRoute(router, 'PATCH /api/workspaces/:workspaceId', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const change = readBody(req, changeWorkspaceSchema);
    res.json(await changeSettings(context, person.id, workspaceId, change));
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/export', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    await throttles.workspaceExport(person.id);
    const pieces = await exportWorkspace(context, person.id, workspaceId);
    res.setHeader('Content-Disposition', 'attachment; filename="workspace.json"');
    res.type('application/json');
    // A reader who takes nothing off must not hold a connection to the database for good.
    await pipeline(Readable.from(pieces), res, { signal: AbortSignal.timeout(limits.exportMs) });
  });

  mountRoute(router, 'POST /api/workspaces/:workspaceId/deletion', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const proof = readBody(req, deleteWorkspaceSchema);
    // Guesses at password and code count; right ones don't.
    await throttles.passwordAttempt(person.id);
    if (proof.code !== undefined) await throttles.secondStepAttempt(person.id);
    await deleteWorkspace(context, person.id, workspaceId, proof);
    await throttles.passwordFound(person.id);
    if (proof.code !== undefined) await throttles.secondStepTaken(person.id);
    res.status(204).end();
  });

  mountRoute(router, 'GET /api/workspaces/:workspaceId/people', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    res.json({ people: await readPeople(context, person.id, workspaceId) });
  });

  mountRoute(router, 'PATCH /api/workspaces/:workspaceId/people/:personId', ...body, async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    const memberId = readId(req, 'personId', 'person');
    const { role } = readBody(req, changeMemberSchema);
    res.json(await changeRole(context, person.id, workspaceId, memberId, role));
  });

  mountRoute(router, 'DELETE /api/workspaces/:workspaceId/people/:personId', async (req, res) => {
    const person = requirePerson(req);
    const workspaceId = readId(req, 'workspaceId', 'workspace');
    await removePerson(context, person.id, workspaceId, readId(req, 'personId', 'person'));
    res.status(204).end();
  });

  return router;
}
