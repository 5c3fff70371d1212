import type { AddressInfo } from 'node:net';
import type { ParsedMail } from 'mailparser';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';
import { vi } from 'vitest';

export interface ReceivedMail {
  readonly to: string;
  readonly parsed: ParsedMail;
  /** As it came over the socket. */
  readonly source: string;
}

export interface TestMailServer {
  readonly smtpUrl: string;
  readonly port: number;
  /** Every mail whose end arrived, in order: what a recipient would find, copies included. */
  readonly received: readonly ReceivedMail[];
  /** Resolves with the mail to an address once it is there. */
  mailTo(address: string): Promise<ReceivedMail>;
  close(): Promise<void>;
}

export interface MailServerOptions {
  /** 0 takes a free one. */
  readonly port?: number;
  /** Runs before a recipient is answered; an SmtpRefusal is the answer. */
  readonly onRecipient?: (address: string) => Promise<void> | void;
  /** Runs once the end of a mail has arrived, before it is answered; an SmtpRefusal is the answer. */
  readonly onEnd?: (mail: ReceivedMail) => Promise<void> | void;
}

export class SmtpRefusal extends Error {
  readonly responseCode: number;
  constructor(responseCode: number, message: string) {
    super(message);
    this.responseCode = responseCode;
  }
}

/** A mail server on a real socket of the loopback, as far as a sender can tell. */
export async function startMailServer(options: MailServerOptions = {}): Promise<TestMailServer> {
  const received: ReceivedMail[] = [];
  const server = new SMTPServer({
    disabledCommands: ['AUTH', 'STARTTLS'],
    disableReverseLookup: true,
    onRcptTo: (address, _session, done) => {
      void answer(async () => options.onRecipient?.(address.address), done);
    },
    onData: (stream, session, done) => {
      void answer(async () => {
        const chunks: Buffer[] = [];
        for await (const chunk of stream) chunks.push(chunk as Buffer);
        const source = Buffer.concat(chunks).toString('utf8');
        const to = session.envelope.rcptTo.map(({ address }) => address).join(',');
        const mail = { to, source, parsed: await simpleParser(source) };
        received.push(mail);
        await options.onEnd?.(mail);
      }, done);
    },
  });
  // Connections that tests cut.
  server.on('error', () => undefined);
  await new Promise<void>((resolve) => server.listen(options.port ?? 0, '127.0.0.1', resolve));
  const { port } = server.server.address() as AddressInfo;
  return {
    smtpUrl: `smtp://127.0.0.1:${port}`,
    port,
    received,
    mailTo: (address) =>
      vi.waitFor(
        () => {
          const found = received.find(({ to }) => to === address);
          if (found === undefined) throw new Error(`no mail to ${address} arrived`);
          return found;
        },
        { timeout: 20_000, interval: 20 },
      ),
    close: () => new Promise((resolve) => server.close(() => resolve())),
  };
}

async function answer(work: () => Promise<unknown>, done: (error?: Error | null) => void): Promise<void> {
  try {
    await work();
    done();
  } catch (error) {
    done(error as Error);
  }
}
