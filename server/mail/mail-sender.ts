import { Readable } from 'node:stream';
import { createTransport } from 'nodemailer';
import type { MailWords } from './mail-words.ts';
import { htmlOf, textOf } from './render-mail.ts';

export interface Letter {
  readonly messageId: string;
  readonly to: string;
  readonly words: MailWords;
  readonly date: Date;
}

export interface SendOptions {
  /**
   * Called when the whole mail but its end has gone out. The server can't have accepted it before this resolves
   * (RFC 5321 section 4.1.1.4: the end of mail data makes it a mail); if it rejects, the connection is cut and it never is.
   */
  readonly beforeEnd: () => Promise<void>;
  /** Cuts the connection. */
  readonly signal?: AbortSignal;
}

/** Hands mails to a mail server. */
export interface MailSender {
  /** Resolves once the server has taken the mail; rejects with a MailProblem. */
  send(letter: Letter, options: SendOptions): Promise<void>;
}

/** Why a mail was not taken. A final problem is the mail's own: the same mail would be refused again. */
export class MailProblem extends Error {
  readonly isFinal: boolean;

  constructor(message: string, options: { readonly isFinal: boolean; readonly cause?: unknown }) {
    super(message, { cause: options.cause });
    this.name = 'MailProblem';
    this.isFinal = options.isFinal;
  }
}

const connectTimeoutMs = 20_000;
const greetingTimeoutMs = 60_000;
// RFC 5321 section 4.5.3.2.6: ten minutes for the answer to the end of data, since giving up early doubles mails.
const answerTimeoutMs = 10 * 60_000;

export function createMailSender({
  smtpUrl,
  from,
}: {
  readonly smtpUrl: string;
  readonly from: { readonly name: string; readonly address: string };
}): MailSender {
  const settings = {
    url: smtpUrl,
    connectionTimeout: connectTimeoutMs,
    greetingTimeout: greetingTimeoutMs,
    socketTimeout: answerTimeoutMs,
    disableFileAccess: true,
    disableUrlAccess: true,
  };
  return {
    async send({ messageId, to, words, date }, { beforeEnd, signal }) {
      const transport = createTransport(settings);
      transport.use('stream', (mail, done) => {
        mail.message.processFunc((input) => Readable.from(endingAfter(input, beforeEnd)));
        done();
      });
      try {
        await transport.sendMail({
          from,
          to: { name: '', address: to },
          messageId,
          date,
          subject: words.subject,
          text: textOf(words),
          html: htmlOf(words),
          // RFC 3834 section 5: so that no holiday notice answers.
          headers: { 'Auto-Submitted': 'auto-generated' },
          ...(signal === undefined ? {} : { signal }),
        });
      } catch (error) {
        throw problemOf(error);
      }
    },
  };
}

/**
 * The mail as it stands, its end held back until `beforeEnd` resolves. Read only once the server wants the mail's data: a
 * stream that pushes would come to its end while recipients are still being asked about.
 */
async function* endingAfter(
  mail: AsyncIterable<Uint8Array | string>,
  beforeEnd: () => Promise<void>,
): AsyncGenerator<Uint8Array | string> {
  yield* mail;
  await beforeEnd();
}

interface SmtpError {
  readonly code?: string;
  readonly command?: string;
  readonly responseCode?: number;
  readonly response?: string;
  readonly message?: string;
}

/** RFC 5321 section 4.2.1: 5yz says that the same will be refused again; it concerns the mail where it answers recipient or data. */
function problemOf(error: unknown): MailProblem {
  const { command, responseCode = 0, response, message } = error as SmtpError;
  const isFinal = responseCode >= 500 && (command === 'RCPT TO' || command === 'DATA');
  const words =
    response === undefined
      ? `the mail server can’t be reached or broke off (${message ?? 'no reason given'})`
      : `the mail server answered ‘${response.replace(/\s+/g, ' ').slice(0, 200)}’`;
  return new MailProblem(words, { isFinal, cause: error });
}
