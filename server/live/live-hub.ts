import type { Database } from '../db/open-database.ts';
import type { Announcement, DesignChange } from './announce.ts';
import { liveChannel } from './announce.ts';

/** What a stream hears: a change of its design, a change of somebody's rights, or that it may have missed something. */
export type Heard =
  | Pick<Announcement, 'change' | 'sequence'>
  | { readonly change: 'place'; readonly personId: string; readonly workspaceId: string }
  | { readonly change: 'gap' };

export interface Follower {
  readonly designId: string;
  readonly workspaceId: string;
  hear(heard: Heard): void;
  /** The process stops: the browser is to look for another. */
  end(): void;
}

/** Brings what PostgreSQL notifies to the streams of this process. */
export interface LiveHub {
  /** Follows until the answer is called. */
  follow(follower: Follower): () => void;
  /** Ends all streams; those that come later end at once. */
  close(): void;
}

/** Listens from the first stream on. */
export function createLiveHub(database: Database): LiveHub {
  const followers = new Set<Follower>();
  let isListening = false;
  let isClosed = false;
  const tell = (heard: Heard, concerns: (follower: Follower) => boolean): void => {
    for (const follower of [...followers]) if (concerns(follower)) follower.hear(heard);
  };
  const listen = (): void => {
    if (isListening) return;
    isListening = true;
    database.listen(liveChannel, {
      onNotification: (payload) => {
        const said = JSON.parse(payload) as Said;
        if (said.change === 'place') tell(said, ({ workspaceId }) => workspaceId === said.workspaceId);
        else tell(said, ({ designId }) => designId === said.designId);
      },
      onGap: () => tell({ change: 'gap' }, () => true),
    });
  };
  return {
    follow(follower) {
      if (isClosed) {
        follower.end();
        return () => {};
      }
      listen();
      followers.add(follower);
      return () => void followers.delete(follower);
    },
    close() {
      isClosed = true;
      for (const follower of [...followers]) follower.end();
      followers.clear();
    },
  };
}

type Said =
  | { readonly change: 'place'; readonly personId: string; readonly workspaceId: string }
  | { readonly change: DesignChange; readonly designId: string; readonly sequence?: number };
