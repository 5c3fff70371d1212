import { z } from 'zod';

/** What a person can be told of by mail. Invitations and password resets are sent to whom they concern in any case. */
export const notificationKinds = ['mention', 'reviewAsked', 'decision', 'shareOpened'] as const;
export type NotificationKind = (typeof notificationKinds)[number];

export const mailTimings = ['at-once', 'daily', 'none'] as const;
export type MailTiming = (typeof mailTimings)[number];
const mailTimingSchema = z.enum(mailTimings);

/** When the one mail of the day is made, in the person's own zone. */
export const digestHour = 7;

function isTimeZone(zone: string): boolean {
  try {
    new Intl.DateTimeFormat('en', { timeZone: zone });
    return true;
  } catch {
    return false;
  }
}

/** GET /api/account/mail → these; PUT /api/account/mail takes all of them and answers them. */
export const mailSettingsSchema = z.strictObject({
  mention: mailTimingSchema,
  reviewAsked: mailTimingSchema,
  decision: mailTimingSchema,
  shareOpened: mailTimingSchema,
  timeZone: z
    .string()
    .max(64, 'expected at most 64 characters')
    .refine(isTimeZone, 'expected a time zone such as UTC or Europe/Lisbon'),
});
export type MailSettings = z.infer<typeof mailSettingsSchema>;

export const defaultMailSettings: MailSettings = {
  mention: 'at-once',
  reviewAsked: 'at-once',
  decision: 'at-once',
  shareOpened: 'none',
  timeZone: 'UTC',
};
