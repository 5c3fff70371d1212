import { createTransport } from 'nodemailer';
import { afterEach, beforeEach, expect, test } from 'vitest';
import type { CaughtMail, MailCatcher } from '../../../server/mail/mail-catcher.ts';
import { startMailCatcher } from '../../../server/mail/mail-catcher.ts';

let catcher: MailCatcher;
let kept: CaughtMail[];
let keep: (mail: CaughtMail) => Promise<boolean>;
const errors: unknown[] = [];

beforeEach(async () => {
  kept = [];
  keep = async (mail) => {
    kept.push(mail);
    return true;
  };
  catcher = await startMailCatcher({ keep: (mail) => keep(mail), onError: (error) => errors.push(error) });
});
afterEach(() => catcher.close());

const send = (text = 'Words') =>
  createTransport({ url: catcher.smtpUrl }).sendMail({
    from: 'longpatch@mail.example',
    to: 'someone@ternwick.example',
    subject: 'A subject — with a dash',
    messageId: '<1@mail.example>',
    text,
    html: '<p>Words</p>',
  });

test('a mail that was taken is kept whole', async () => {
  await send();
  expect(kept).toEqual([
    {
      messageId: '<1@mail.example>',
      from: 'longpatch@mail.example',
      to: 'someone@ternwick.example',
      subject: 'A subject — with a dash',
      text: 'Words',
      html: '<p>Words</p>',
      source: expect.stringContaining('Message-ID: <1@mail.example>') as string,
    },
  ]);
});

test('what nobody here sent is refused for good, what can’t be kept now only for now', async () => {
  keep = async () => false;
  await expect(send()).rejects.toMatchObject({ responseCode: 550 });
  keep = async () => Promise.reject(new Error('the database is away'));
  await expect(send()).rejects.toMatchObject({ responseCode: 451 });
  expect(errors).toMatchObject([{ message: 'the database is away' }]);
});

test('a mail of more than a mebibyte is refused', async () => {
  await expect(send('x'.repeat(1_100_000))).rejects.toMatchObject({ responseCode: 552 });
  expect(kept).toEqual([]);
});

test('only this machine can reach it', () => {
  expect(new URL(catcher.smtpUrl).hostname).toBe('127.0.0.1');
});
