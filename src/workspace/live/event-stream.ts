import type { LiveEvent } from '../../contract/live.ts';
import { liveEvents } from '../../contract/live.ts';

interface StreamOptions {
  readonly url: (connectionId: string) => string;
  readonly onOpen: (connectionId: string) => void;
  readonly onEvent: (event: LiveEvent, data: unknown) => void;
  readonly onLost: () => void;
}

const firstRetryMs = 1_000;
const lastRetryMs = 30_000;
// Browsers keep about six connections to one server over HTTP/1.1, so a tab that nobody looks at gives its own back.
const hiddenForMs = 30_000;

/**
 * Listens to a server's events for as long as the page is looked at, again after every loss, under a new name each time.
 * Answers what ends it. A browser without event streams hears nothing; it still catches up when it comes to the front.
 */
export const keepStream = ({ url, onOpen, onEvent, onLost }: StreamOptions): (() => void) => {
  if (typeof EventSource === 'undefined') return () => {};
  let source: EventSource | undefined;
  let timer: ReturnType<typeof setTimeout> | undefined;
  let retryMs = firstRetryMs;

  const shut = (): void => {
    clearTimeout(timer);
    timer = undefined;
    if (source === undefined) return;
    source.close();
    source = undefined;
    onLost();
  };
  const listen = (): void => {
    clearTimeout(timer);
    timer = undefined;
    if (source !== undefined) return;
    const connectionId = crypto.randomUUID();
    const opened = new EventSource(url(connectionId));
    source = opened;
    opened.addEventListener('open', () => {
      retryMs = firstRetryMs;
      onOpen(connectionId);
    });
    opened.addEventListener('error', () => {
      if (source !== opened) return;
      shut();
      // Spread, so that a process that comes back is not met by everybody at once.
      timer = setTimeout(listen, retryMs * (0.5 + Math.random()));
      retryMs = Math.min(retryMs * 2, lastRetryMs);
    });
    for (const event of liveEvents)
      opened.addEventListener(event, ({ data }) => onEvent(event, JSON.parse(String(data)) as unknown));
  };
  const look = (): void => {
    if (document.visibilityState === 'visible') listen();
    else {
      clearTimeout(timer);
      timer = setTimeout(shut, hiddenForMs);
    }
  };
  const now = (): void => {
    retryMs = firstRetryMs;
    look();
  };

  look();
  document.addEventListener('visibilitychange', look);
  window.addEventListener('online', now);
  return () => {
    document.removeEventListener('visibilitychange', look);
    window.removeEventListener('online', now);
    shut();
  };
};
