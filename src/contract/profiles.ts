import { z } from 'zod';
import { profileSchema } from '../engine/model/underlay.ts';

/** A class of equipment as the team measured it. */
export const equipmentProfileSchema = z.object({
  id: z.string(),
  profile: profileSchema,
  changedAt: z.iso.datetime(),
  /** The person's name. */
  changedBy: z.string().nullable(),
  archivedAt: z.iso.datetime().nullable(),
  /** Designs that hold a copy, the last changed first, those put away left out. */
  usedIn: z.array(
    z.object({
      designId: z.string(),
      title: z.string(),
      /** How many devices have it. */
      devices: z.int(),
      /** False when the copy says something else than the profile does now. */
      current: z.boolean(),
    }),
  ),
});
export type EquipmentProfile = z.infer<typeof equipmentProfileSchema>;

/** GET /api/workspaces/:workspaceId/profiles: by name, archived ones too. */
export const profileListSchema = z.object({ profiles: z.array(equipmentProfileSchema) });
/** POST /api/workspaces/:workspaceId/profiles → 201, the profile. 409 where another has the name. */
export const createProfileSchema = z.strictObject({ profile: profileSchema });
/**
 * PATCH /api/profiles/:profileId → the profile. `profile` replaces what it said; with `basedOn` (the `changedAt` that was read)
 * 409 if somebody was faster.
 */
export const changeProfileSchema = z.strictObject({
  profile: profileSchema.optional(),
  basedOn: z.iso.datetime().optional(),
  archived: z.boolean().optional(),
});

const copyPrefix = 'eq-';

/** The id under which a design keeps its copy of a workspace's profile. */
export const copyIdOf = (profileId: string): string => `${copyPrefix}${profileId}`;

/** The workspace's profile that an entry of a design's `profiles` is a copy of; undefined for one of the design's own. */
export const profileIdOf = (copyId: string): string | undefined =>
  z.guid().safeParse(copyId.slice(copyPrefix.length)).success && copyId.startsWith(copyPrefix)
    ? copyId.slice(copyPrefix.length)
    : undefined;
