import type { LiveEvent, PlaceInDesign, livePatchesSchema, livePresenceSchema } from '#contract/live.ts';
import type { z } from 'zod';
import { authorise } from '../auth/authorise.ts';
import { Refusal, notFound } from '../errors.ts';
import { announce } from '../live/announce.ts';
import type { Heard, LiveHub } from '../live/live-hub.ts';
import {
  listPresence,
  putPresence,
  removePresence,
  removeStalePresence,
  touchPresence,
} from '../repositories/design-presence.ts';
import { findDesign } from '../repositories/designs.ts';
import type { Context } from './context.ts';
import { initialsOf } from './describe-session.ts';

/** One browser that follows a design. */
export interface Stream {
  send(event: LiveEvent, data: object): void;
  /** Shows that the stream is alive, so that nothing between closes it. */
  beat(): void;
  end(): void;
}

const beatMs = 15_000;
// A process that died says nothing any more; its people are gone after three beats.
const forgottenAfterMs = 3 * beatMs;
// Asked anew now and then, by whatever way the reader has by then: a token that was revoked ends there.
const longestStreamMs = 60 * 60 * 1000;
/** Selections and views come in bursts; one telling a moment is enough. */
const presencePauseMs = 150;

/**
 * Tells a stream what happens to a design until the answer is called, the reader loses the right to see it, or the process
 * ends. First comes how things stand, so that nothing is missed in between.
 */
export async function followDesign(
  context: Context,
  hub: LiveHub,
  reader: { readonly personId: string; readonly connectionId: string; isSignedIn(): Promise<boolean> },
  designId: string,
  stream: Stream,
): Promise<() => void> {
  const { knex } = context.database;
  const mayRead = async () => {
    const design = await findDesign(knex, designId);
    if (design === null) throw notFound('design');
    await authorise(knex, reader.personId, 'design.read', design.workspaceId, 'design');
    return design;
  };
  const { workspaceId } = await mayRead();

  let hasEnded = false;
  let presenceTimer: NodeJS.Timeout | undefined;
  const end = (): void => {
    if (hasEnded) return;
    hasEnded = true;
    clearInterval(beats);
    clearTimeout(longest);
    clearTimeout(presenceTimer);
    unfollow();
    stream.end();
    context.database.inBackground(async () => {
      if (await removePresence(knex, reader.connectionId))
        await announce(knex, { designId, change: 'presence' });
    });
  };
  const inBackground = (work: () => Promise<void>): void =>
    context.database.inBackground(() => (hasEnded ? Promise.resolve() : work()));
  const send = <T extends object>(event: LiveEvent, data: T): void => {
    if (!hasEnded) stream.send(event, data);
  };
  const askAgain = (): void =>
    inBackground(async () => {
      const [isSignedIn, isAllowed] = await Promise.all([
        reader.isSignedIn(),
        mayRead().then(
          () => true,
          (error: unknown) => {
            if (error instanceof Refusal) return false;
            throw error;
          },
        ),
      ]);
      if (!isSignedIn || !isAllowed) end();
    });
  const tellPatches = (): void =>
    inBackground(async () => {
      const design = await findDesign(knex, designId);
      if (design !== null)
        send('patches', { sequence: design.sequence } satisfies z.infer<typeof livePatchesSchema>);
    });
  const tellPresence = (): void => {
    presenceTimer ??= setTimeout(() => {
      presenceTimer = undefined;
      inBackground(async () => {
        const since = new Date(context.clock().getTime() - forgottenAfterMs);
        const people = (await listPresence(knex, designId, since)).map((row) => ({
          ...row,
          initials: initialsOf(row.name),
        }));
        send('presence', { people } satisfies z.infer<typeof livePresenceSchema>);
      });
    }, presencePauseMs);
  };
  const hear = (heard: Heard): void => {
    if (heard.change === 'place') {
      if (heard.personId === reader.personId) askAgain();
    } else if (heard.change === 'gap') {
      tellPatches();
      tellPresence();
      for (const event of ['waivers', 'comments', 'state', 'shares'] as const) send(event, {});
    } else if (heard.change === 'patches') {
      if (heard.sequence === undefined) tellPatches();
      else send('patches', { sequence: heard.sequence } satisfies z.infer<typeof livePatchesSchema>);
    } else if (heard.change === 'presence') tellPresence();
    else send(heard.change, {});
  };
  const unfollow = hub.follow({ designId, workspaceId, hear, end: () => end() });
  const beats = setInterval(() => {
    stream.beat();
    askAgain();
    inBackground(async () => {
      const now = context.clock();
      await touchPresence(knex, reader.connectionId, now);
      await removeStalePresence(knex, new Date(now.getTime() - forgottenAfterMs));
      // Somebody may have gone without a word.
      tellPresence();
    });
  }, beatMs);
  const longest = setTimeout(() => end(), longestStreamMs);
  tellPatches();
  tellPresence();
  return end;
}

/** Says where somebody is in a design, to everybody who has it open. */
export async function sayPresence(
  context: Context,
  personId: string,
  designId: string,
  { connectionId, place }: { readonly connectionId: string; readonly place: PlaceInDesign },
): Promise<void> {
  const { database, clock } = context;
  const design = await findDesign(database.knex, designId);
  if (design === null) throw notFound('design');
  await authorise(database.knex, personId, 'design.read', design.workspaceId, 'design');
  const isTheirs = await putPresence(database.knex, { connectionId, designId, personId, place }, clock());
  if (!isTheirs)
    throw new Refusal(
      'conflict',
      'That connection follows another design or belongs to somebody else; open the design again.',
    );
  await announce(database.knex, { designId, change: 'presence' });
}
