import type { Knex } from 'knex';
import type { MailSettings, NotificationKind } from '#contract/mail-settings.ts';
import { defaultMailSettings } from '#contract/mail-settings.ts';
import type { Notification } from './mail.ts';

/** What a person's settings call this kind of mail. */
export const settingOfKind: { readonly [kind in Notification['kind']]: NotificationKind } = {
  mention: 'mention',
  'review-asked': 'reviewAsked',
  approved: 'decision',
  'sent-back': 'decision',
  'share-opened': 'shareOpened',
};

const columns = {
  mention: 'mention',
  reviewAsked: 'review_asked',
  decision: 'decision',
  shareOpened: 'share_opened',
  timeZone: 'time_zone',
} as const satisfies { readonly [key in keyof MailSettings]: string };

/** How a person wants to hear of things; the defaults until they say otherwise. */
export async function readMailSettings(knex: Knex, personId: string): Promise<MailSettings> {
  const row = await knex('mail_settings').where({ person_id: personId }).first<MailSettings>(columns);
  return row ?? defaultMailSettings;
}

export async function writeMailSettings(knex: Knex, personId: string, settings: MailSettings): Promise<void> {
  const row = Object.fromEntries(
    Object.entries(columns).map(([key, column]) => [column, settings[key as keyof MailSettings]]),
  );
  await knex('mail_settings')
    .insert({ person_id: personId, ...row })
    .onConflict('person_id')
    .merge();
}
