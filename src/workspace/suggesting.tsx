import { createContext, use, useCallback, useMemo, useState, type ReactNode } from 'react';
import type { Design } from '../engine/model/design.ts';
import type { MergePatch } from '../engine/model/merge-patch.ts';
import { diffPatch } from '../engine/model/merge-patch.ts';
import { useMedia } from '../lib/use-media.ts';
import { draftServer, draftStorage } from './draft-server.ts';
import { browserEditStorage } from './edit-storage.ts';
import { openDesign, type OpenDesign } from './open-design.ts';
import { OpenDesignProvider, useOpenDesign, useOpenState } from './open-design-context.tsx';
import { useDesignPlace } from './design-place.tsx';

/** A draft of the reader's own, on which they draw what they suggest. */
export interface SuggestionDraft {
  readonly base: Design;
  /** Number of the last patch in `base`. */
  readonly baseSequence: number;
  /** Gives the draft up, or is done with it. */
  readonly end: () => void;
}

interface Suggesting {
  readonly draft: SuggestionDraft | undefined;
  /** Begins a draft; undefined for who may change the design itself, or may not comment. */
  readonly begin: (() => void) | undefined;
}

const SuggestingContext = createContext<Suggesting>({ draft: undefined, begin: undefined });

/** Whether the reader is drawing a suggestion, or may begin to. */
export const useSuggesting = (): Suggesting => use(SuggestingContext);

/** What the draft changes, as the least patch. */
export const useSuggestedPatch = ({ base }: SuggestionDraft): MergePatch => {
  const document = useOpenState((state) => state.document);
  return useMemo(() => diffPatch(base, document), [base, document]);
};

/**
 * Lets a reader who may not edit draw on a copy of the design: everything inside then shows the copy and changes it, undo and
 * checks included, and nothing is saved. The copy outlives a reload.
 */
export function SuggestingProvider({ children }: { readonly children: ReactNode }) {
  const open = useOpenDesign();
  const { designId, actions } = useDesignPlace();
  const editable = useOpenState((state) => state.editable);
  const isPhone = useMedia('(max-width: 767px)');
  const storage = useMemo(
    () => draftStorage(browserEditStorage(localStorage, `suggestion.${designId}`, Date.now)),
    [designId],
  );
  const maySuggest = !editable && !isPhone && actions.includes('comment.write');
  const fresh = useCallback((): { readonly base: Design; readonly baseSequence: number } => {
    const { document, sequence } = open.store.getState();
    return { base: document, baseSequence: sequence };
  }, [open]);
  const [begun, setBegun] = useState(() => (maySuggest && storage.load().length > 0 ? fresh() : undefined));
  const suggesting = useMemo(
    (): Suggesting => ({
      draft:
        begun === undefined
          ? undefined
          : {
              ...begun,
              end: () => {
                storage.clear();
                setBegun(undefined);
              },
            },
      begin: maySuggest && begun === undefined ? () => setBegun(fresh()) : undefined,
    }),
    [begun, maySuggest, storage, fresh],
  );
  if (begun === undefined) return <SuggestingContext value={suggesting}>{children}</SuggestingContext>;
  const openDraft = (): OpenDesign =>
    openDesign({
      document: begun.base,
      sequence: begun.baseSequence,
      editable: true,
      server: draftServer,
      storage,
      newEditId: () => crypto.randomUUID(),
      now: Date.now,
    });
  return (
    <SuggestingContext value={suggesting}>
      <OpenDesignProvider key="draft" open={openDraft}>
        {children}
      </OpenDesignProvider>
    </SuggestingContext>
  );
}
