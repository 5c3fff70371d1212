import { z } from 'zod';
import { linkTokenSchema } from './invitations.ts';
import { emailSchema, newPasswordSchema } from './session.ts';

export const resetMinutes = 60;

/** POST /api/password-reset → 202 and nothing, whoever the address belongs to. */
export const askForResetSchema = z.strictObject({ email: emailSchema });
/** POST /api/password-reset/link → whose password the link sets. 404 where it holds no longer. */
export const openResetSchema = z.strictObject({ token: linkTokenSchema });
export const openedResetSchema = z.object({ email: z.string() });
/** POST /api/password-reset/password → 204; every session of the person ends. */
export const resetPasswordSchema = z.strictObject({ token: linkTokenSchema, password: newPasswordSchema });
