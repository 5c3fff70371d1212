import type { Role } from '#contract/session.ts';
import type { Member } from '#contract/workspaces.ts';
import { authorise } from '../auth/authorise.ts';
import { permits } from '../auth/permissions.ts';
import { Refusal, notFound } from '../errors.ts';
import { announcePlace } from '../live/announce.ts';
import { recordActivity } from '../repositories/activity.ts';
import type { MemberRow } from '../repositories/members.ts';
import { countOwners, deleteMembership, findMember, listMembers, setRole } from '../repositories/members.ts';
import { lockWorkspace } from '../repositories/workspaces.ts';
import type { Context } from './context.ts';

/** Who is in the workspace, by name. Only owners are told whose sign-in asks for one step and is easier to break. */
export async function readPeople(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<Member[]> {
  const role = await authorise(knex, personId, 'workspace.read', workspaceId, 'workspace');
  return (await listMembers(knex, workspaceId)).map((row) => memberOf(row, role));
}

/** Gives a member another role; the last owner keeps theirs. */
export async function changeRole(
  { database, clock }: Context,
  personId: string,
  workspaceId: string,
  memberId: string,
  role: Role,
): Promise<Member> {
  return database.knex.transaction(async (trx) => {
    // Held up before anything is read: of two owners who demote one another the second finds out that they are none.
    await lockWorkspace(trx, workspaceId);
    const own = await authorise(trx, personId, 'people.manage', workspaceId, 'workspace');
    const before = await findMember(trx, workspaceId, memberId);
    if (before === null) throw notFound('person');
    if (before.role === role) return memberOf(before, own);
    if (before.role === 'owner' && (await countOwners(trx, workspaceId)) === 1) throw lastOwner(before.name);
    await setRole(trx, workspaceId, memberId, role);
    await recordActivity(trx, {
      workspaceId,
      at: clock(),
      action: 'person.role-changed',
      personId,
      object: { kind: 'person', id: memberId, name: before.name },
      details: { from: before.role, to: role },
    });
    await announcePlace(trx, { workspaceId, personId: memberId });
    return memberOf({ ...before, role }, own);
  });
}

/** Takes a member out of the workspace, or lets them leave; what they did stays, under their name. */
export async function removePerson(
  { database, clock }: Context,
  personId: string,
  workspaceId: string,
  memberId: string,
): Promise<void> {
  await database.knex.transaction(async (trx) => {
    await lockWorkspace(trx, workspaceId);
    const isLeaving = memberId === personId;
    await authorise(trx, personId, isLeaving ? 'workspace.read' : 'people.manage', workspaceId, 'workspace');
    const member = await findMember(trx, workspaceId, memberId);
    if (member === null) throw notFound('person');
    if (member.role === 'owner' && (await countOwners(trx, workspaceId)) === 1) throw lastOwner(member.name);
    await deleteMembership(trx, workspaceId, memberId);
    await recordActivity(trx, {
      workspaceId,
      at: clock(),
      action: isLeaving ? 'person.left' : 'person.removed',
      personId,
      object: { kind: 'person', id: memberId, name: member.name },
      details: { role: member.role },
    });
    await announcePlace(trx, { workspaceId, personId: memberId });
  });
}

function lastOwner(name: string): Refusal {
  return new Refusal(
    'conflict',
    `${name} is the only owner of this workspace, and a workspace without one could not be run; make somebody else an owner first.`,
  );
}

function memberOf({ lastSeenAt, hasSecondStep, ...row }: MemberRow, readerRole: Role): Member {
  return {
    ...row,
    hasSecondStep: permits(readerRole, 'people.manage') ? hasSecondStep : null,
    lastSeenAt: lastSeenAt?.toISOString() ?? null,
  };
}
