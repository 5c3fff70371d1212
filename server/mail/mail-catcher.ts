import type { AddressInfo } from 'node:net';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

export interface CaughtMail {
  readonly messageId: string;
  readonly from: string;
  readonly to: string;
  readonly subject: string;
  readonly text: string;
  readonly html: string;
  /** Every line as it came over the wire. */
  readonly source: string;
}

export interface MailCatcher {
  /** As SMTP_URL would name it. */
  readonly smtpUrl: string;
  close(): Promise<void>;
}

const longestMailBytes = 1024 * 1024;

/**
 * A mail server on loopback that delivers nothing: it gives each mail to `keep` and accepts it once that has resolved.
 * What `keep` answers false to is refused.
 */
export async function startMailCatcher({
  keep,
  onError,
}: {
  readonly keep: (mail: CaughtMail) => Promise<boolean>;
  readonly onError: (error: unknown) => void;
}): Promise<MailCatcher> {
  const server = new SMTPServer({
    name: 'localhost',
    banner: 'Longpatch keeps this mail for its mailbox page',
    disabledCommands: ['AUTH', 'STARTTLS'],
    disableReverseLookup: true,
    size: longestMailBytes,
    onData(stream, session, done) {
      void (async () => {
        const chunks: Buffer[] = [];
        for await (const chunk of stream) chunks.push(chunk as Buffer);
        if (stream.sizeExceeded) return refusal(552, `The mail is larger than ${longestMailBytes} bytes.`);
        const source = Buffer.concat(chunks);
        const parsed = await simpleParser(source, { skipTextToHtml: true, skipImageLinks: true });
        const { mailFrom, rcptTo } = session.envelope;
        const isKept = await keep({
          messageId: parsed.messageId ?? '',
          from: parsed.from?.text ?? (mailFrom === false ? '' : (mailFrom.address ?? '')),
          to: rcptTo.map(({ address }) => address).join(', '),
          subject: parsed.subject ?? '',
          text: parsed.text ?? '',
          html: parsed.html || '',
          source: source.toString('utf8'),
        });
        return isKept ? null : refusal(550, 'Nobody here has sent such a mail.');
      })().then(
        (error) => (error === null ? done(null, 'Kept') : done(error)),
        (error: unknown) => {
          onError(error);
          done(refusal(451, 'The mail cannot be kept just now; try again.'));
        },
      );
    },
  });
  server.on('error', onError);
  await new Promise<void>((resolve, reject) => {
    server.server.once('error', reject);
    server.listen(0, '127.0.0.1', resolve);
  });
  const { port } = server.server.address() as AddressInfo;
  return {
    smtpUrl: `smtp://127.0.0.1:${port}`,
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

function refusal(responseCode: number, message: string): Error {
  return Object.assign(new Error(message), { responseCode });
}
