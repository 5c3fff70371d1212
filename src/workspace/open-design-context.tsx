import { createContext, use, useEffect, useState, type ReactNode } from 'react';
import { useStore } from 'zustand';
import type { Committed, OpenDesign, OpenDesignState } from './open-design.ts';
import { currentSheet } from './current-sheet.ts';
import { patchOnSheet } from './operations/on-sheet.ts';
import type { Operation } from './operations/operation.ts';

const OpenDesignContext = createContext<OpenDesign | null>(null);

/** Holds the open design for everything inside; made once, closed when the screen goes. */
export function OpenDesignProvider({
  open,
  children,
}: {
  readonly open: () => OpenDesign;
  readonly children: ReactNode;
}) {
  const [design] = useState(open);
  useEffect(() => {
    const front = (): void => {
      if (document.visibilityState === 'visible') void design.catchUp();
    };
    const back = (): void => void design.flush();
    window.addEventListener('online', back);
    window.addEventListener('focus', front);
    document.addEventListener('visibilitychange', front);
    window.addEventListener('pagehide', back);
    return () => {
      window.removeEventListener('online', back);
      window.removeEventListener('focus', front);
      document.removeEventListener('visibilitychange', front);
      window.removeEventListener('pagehide', back);
      void design.flush();
    };
  }, [design]);
  return <OpenDesignContext value={design}>{children}</OpenDesignContext>;
}

/** What can be done with the open design. */
export function useOpenDesign(): OpenDesign {
  const design = use(OpenDesignContext);
  if (design === null) throw new Error('No design is open here.');
  return design;
}

/** A part of the open design's state; the component is drawn again only when that part changes. */
export function useOpenState<T>(select: (state: OpenDesignState) => T): T {
  return useStore(useOpenDesign().store, select);
}

/** Does an operation as one gesture; a refusal comes back as its reason. */
export const perform = (
  design: OpenDesign,
  operation: Operation,
): { readonly ok: true } | { readonly ok: false; readonly why: string } => {
  if (!operation.ok) return operation;
  const { document } = design.store.getState();
  const committed: Committed = design.commit(
    operation.label,
    patchOnSheet(document, operation.patch, currentSheet()),
  );
  if (!committed.ok)
    return {
      ok: false,
      why: committed.problems.map((problem) => `${problem.path}: ${problem.expected}`).join('; '),
    };
  if (operation.created !== undefined) design.select(operation.created);
  return { ok: true };
};

/** An id for a new entry: a readable start and enough randomness that two people never make the same one. */
export const newEntryId = (prefix: string): string =>
  `${prefix}-${crypto
    .getRandomValues(new Uint32Array(2))
    .reduce((text, n) => text + n.toString(36), '')
    .slice(0, 9)}`;
