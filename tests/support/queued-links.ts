import type { TestApplication } from './test-application.ts';

/** What stands in the link of the last mail that was queued to an address. */
export async function linkTo(
  { database }: Pick<TestApplication, 'database'>,
  email: string,
): Promise<string> {
  const mail = await database
    .knex('mails')
    .where({ to_email: email.toLowerCase() })
    .whereNotNull('content')
    .orderBy('queued_at', 'desc')
    .first<{ content: { link: string } } | undefined>('content');
  if (mail === undefined) throw new Error(`no mail to ${email} is queued`);
  return mail.content.link.split('/').at(-1)!;
}
