import type { KeptMail, OpenedMail } from '#contract/mailbox.ts';
import { authorise } from '../auth/authorise.ts';
import { notFound } from '../errors.ts';
import type { KeptMailRow, OpenedMailRow } from '../repositories/caught-mails.ts';
import { findKeptMail, listKeptMails } from '../repositories/caught-mails.ts';
import type { Context } from './context.ts';
import { limits } from './limits.ts';

/** The mails of a workspace that were kept instead of delivered; for its owners, like everything that concerns people. */
export async function readMailbox(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
): Promise<KeptMail[]> {
  await authorise(knex, personId, 'people.manage', workspaceId, 'workspace');
  return (await listKeptMails(knex, workspaceId, personId, limits.keptMails)).map(keptMailOf);
}

export async function readKeptMail(
  context: Context,
  personId: string,
  workspaceId: string,
  mailId: string,
): Promise<OpenedMail> {
  const row = await findMail(context, personId, workspaceId, mailId);
  return { ...keptMailOf(row), from: row.from, text: row.text, source: row.source };
}

/** A kept mail's HTML, such that its links open beside the page that shows it. */
export async function readMailPage(
  context: Context,
  personId: string,
  workspaceId: string,
  mailId: string,
): Promise<string> {
  const { html } = await findMail(context, personId, workspaceId, mailId);
  return html.replace('<head>', '<head>\n<base target="_blank">');
}

async function findMail(
  { database: { knex } }: Context,
  personId: string,
  workspaceId: string,
  mailId: string,
): Promise<OpenedMailRow> {
  await authorise(knex, personId, 'people.manage', workspaceId, 'mail');
  const row = await findKeptMail(knex, workspaceId, personId, mailId);
  if (row === null) throw notFound('mail');
  return row;
}

function keptMailOf({ id, to, subject, keptAt }: KeptMailRow): KeptMail {
  return { id, to, subject, keptAt: keptAt.toISOString() };
}
