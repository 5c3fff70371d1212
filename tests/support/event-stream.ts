import type { IncomingMessage } from 'node:http';
import { get } from 'node:http';
import { setTimeout as delay } from 'node:timers/promises';

/** One server-sent event (HTML Standard, section 9.2.6). */
export interface StreamedEvent {
  readonly event: string;
  readonly data: unknown;
}

export interface EventStream {
  readonly status: number;
  readonly contentType: string;
  /** Everything that came so far. */
  events(): readonly StreamedEvent[];
  /** The first event after the ones asked for before that fits; fails when none comes in time. */
  next(fits: (event: StreamedEvent) => boolean): Promise<StreamedEvent>;
  isEnded(): boolean;
  close(): void;
}

const patienceMs = 8_000;

/** Reads an address as a browser's EventSource does, with the cookies given. */
export async function openEventStream(url: string, cookie: string): Promise<EventStream> {
  const response = await new Promise<IncomingMessage>((resolve, reject) => {
    get(url, { headers: { accept: 'text/event-stream', cookie } }, resolve).once('error', reject);
  });
  const events: StreamedEvent[] = [];
  let ended = false;
  let read = 0;
  let rest = '';
  response.setEncoding('utf8');
  response.on('data', (chunk: string) => {
    const blocks = (rest + chunk).split('\n\n');
    rest = blocks.pop() ?? '';
    for (const block of blocks) {
      const fields = new Map(
        block.split('\n').map((line) => {
          const colon = line.indexOf(':');
          return [line.slice(0, colon), line.slice(colon + 1).trimStart()];
        }),
      );
      const event = fields.get('event');
      if (event !== undefined) events.push({ event, data: JSON.parse(fields.get('data') ?? 'null') });
    }
  });
  response.on('close', () => (ended = true));
  response.on('error', () => (ended = true));
  return {
    status: response.statusCode ?? 0,
    contentType: response.headers['content-type'] ?? '',
    events: () => events,
    async next(fits) {
      const giveUpAt = Date.now() + patienceMs;
      for (;;) {
        while (read < events.length) {
          const event = events[read++]!;
          if (fits(event)) return event;
        }
        if (Date.now() > giveUpAt)
          throw new Error(`no such event came; there were ${JSON.stringify(events)}`);
        await delay(10);
      }
    },
    isEnded: () => ended,
    close: () => response.destroy(),
  };
}
