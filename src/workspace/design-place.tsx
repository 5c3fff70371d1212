import { createContext, use, type ReactNode } from 'react';
import type { Action } from '../contract/session.ts';

/** Where the open design is kept, and what the reader may do with it. */
export interface DesignPlace {
  readonly designId: string;
  readonly workspaceId: string;
  readonly actions: readonly Action[];
  /** Where the server draws what is shown, without the ending; the design's own sheet where absent. */
  readonly sheetPath?: string;
}

const DesignPlaceContext = createContext<DesignPlace | null>(null);

export function DesignPlaceProvider({
  place,
  children,
}: {
  readonly place: DesignPlace;
  readonly children: ReactNode;
}) {
  return <DesignPlaceContext value={place}>{children}</DesignPlaceContext>;
}

export function useDesignPlace(): DesignPlace {
  const place = use(DesignPlaceContext);
  if (place === null) throw new Error('The design is kept nowhere.');
  return place;
}

/** Whether the reader may do this with the open design. The server decides; this only hides what it would refuse. */
export function useMayHere(action: Action): boolean {
  return use(DesignPlaceContext)?.actions.includes(action) ?? false;
}
