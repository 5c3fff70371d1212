import { useQueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import { useLocation } from 'react-router-dom';
import type { PlaceInDesign } from '../../contract/live.ts';
import { livePatchesSchema, livePresenceSchema } from '../../contract/live.ts';
import { callApiForNothing } from '../../lib/api-client.ts';
import { useSession } from '../../lib/session.ts';
import { useOpenDesign } from '../open-design-context.tsx';
import type { OpenDesign } from '../open-design.ts';
import { keepStream } from './event-stream.ts';
import { clearPresence, setOthers, setPage, usePresence } from './presence.ts';

// A pointer that draws a marquee selects a hundred times a second; others need to see where it ends.
const sayAfterMs = 250;
const mostSelected = 20;

/** Brings what others do to this design's pages as it happens, and tells others where this window is. */
export function useLiveDesign(designId: string): void {
  const open = useOpenDesign();
  const queryClient = useQueryClient();
  const personId = useSession()?.person?.id;
  const { pathname } = useLocation();
  const page = pathname.split('/')[3] || 'sheet';

  useEffect(() => {
    const base = `/api/designs/${encodeURIComponent(designId)}`;
    let connectionId: string | undefined;
    let timer: ReturnType<typeof setTimeout> | undefined;
    let said = '';
    const say = (): void => {
      timer = undefined;
      const place = placeOf(open);
      const text = JSON.stringify(place);
      if (connectionId === undefined || text === said) return;
      said = text;
      callApiForNothing(`${base}/presence`, { method: 'PUT', body: { connectionId, place } }).catch(() => {
        // The next change of place tries again; nobody waits for it.
        said = '';
      });
    };
    const sayLater = (): void => {
      timer ??= setTimeout(say, sayAfterMs);
    };
    const read = (...queryKey: readonly string[]) => void queryClient.invalidateQueries({ queryKey });
    const end = keepStream({
      url: (id) => `${base}/live?connectionId=${id}`,
      onOpen: (id) => {
        connectionId = id;
        said = '';
        say();
      },
      onLost: () => {
        connectionId = undefined;
        setOthers([]);
      },
      onEvent: (event, data) => {
        if (event === 'patches') void catchUpTo(open, livePatchesSchema.parse(data).sequence);
        else if (event === 'presence')
          setOthers(livePresenceSchema.parse(data).people.filter((each) => each.personId !== personId));
        else if (event === 'state') {
          read('open-design', designId);
          read('revisions', designId);
        } else read(event, designId);
        if (event === 'state' || event === 'waivers') read('engagements');
      },
    });
    const unsubscribe = [
      open.store.subscribe((state, before) => {
        if (state.selection !== before.selection) sayLater();
      }),
      usePresence.subscribe((state, before) => {
        if (state.view !== before.view || state.page !== before.page) sayLater();
      }),
    ];
    return () => {
      clearTimeout(timer);
      unsubscribe.forEach((each) => each());
      end();
      clearPresence();
    };
  }, [designId, open, queryClient, personId]);

  useEffect(() => setPage(page), [page]);
}

const placeOf = (open: OpenDesign): PlaceInDesign => {
  const { page, view } = usePresence.getState();
  return { page, view, selection: open.store.getState().selection.slice(0, mostSelected) };
};

/** Fetches what is missing; a save that is on its way brings some of it, so that once may not be enough. */
const catchUpTo = async (open: OpenDesign, sequence: number): Promise<void> => {
  for (let tries = 0; tries < 3 && open.store.getState().sequence < sequence; tries += 1)
    await open.catchUp();
};
