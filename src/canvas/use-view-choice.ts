import { useEffect, useMemo, useRef } from 'react';
import { viewLayers, type ViewChoice, type ViewLayer } from '../drawing/view-layers.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';

export interface ChosenView {
  /** As it stands in the address. Segments that are no longer there are left out. */
  readonly choice: ViewChoice;
  readonly isWhole: boolean;
  readonly toggleLayer: (layer: ViewLayer) => void;
  readonly toggleSegment: (id: string) => void;
  /** Only these segments; all again where none is left out. */
  readonly showOnly: (segments: readonly string[]) => void;
  readonly showEverything: () => void;
}

const listed = (text: string): readonly string[] => text.split(',').filter(Boolean);

/** The layers and segments that an address asks for; what it doesn't say is shown. */
export const readViewChoice = (
  layers: string,
  segment: string,
  known: (id: string) => boolean,
): ViewChoice => {
  const named = viewLayers.filter((layer) => listed(layers).includes(layer));
  const segments = listed(segment).filter(known);
  return {
    layers: named.length === 0 ? viewLayers : named,
    ...(segments.length === 0 ? {} : { segments }),
  };
};

/** What is shown of the sheet, kept in the address so that a view can be sent to a colleague. */
export function useViewChoice(): ChosenView {
  const open = useOpenDesign();
  const segments = useOpenState((state) => state.document.segments);
  const { valueOf, change } = useSearchValues();
  const [layersText, segmentText] = [valueOf('layers'), valueOf('segment')];
  const choice = useMemo(
    () => readViewChoice(layersText, segmentText, (id) => Object.hasOwn(segments, id)),
    [layersText, segmentText, segments],
  );
  const write = useRef(change);
  useEffect(() => {
    write.current = change;
  });
  return useMemo(() => {
    const showOnly = (ids: readonly string[]): void => {
      const all = Object.keys(open.store.getState().document.segments);
      const isAll = all.every((id) => ids.includes(id));
      write.current({ segment: isAll ? '' : ids.join(',') });
    };
    return {
      choice,
      isWhole: choice.layers.length === viewLayers.length && choice.segments === undefined,
      toggleLayer: (layer) => {
        const on = viewLayers.filter((one) => choice.layers.includes(one) !== (one === layer));
        // Without any layer there would be nothing to look at: the last one turned off brings the others back.
        const next = on.length === 0 ? viewLayers.filter((one) => one !== layer) : on;
        write.current({ layers: next.length === viewLayers.length ? '' : next.join(',') });
      },
      toggleSegment: (id) => {
        const all = Object.keys(open.store.getState().document.segments);
        const shown = choice.segments ?? all;
        const next = all.filter((one) => shown.includes(one) !== (one === id));
        showOnly(next.length === 0 ? all : next);
      },
      showOnly,
      showEverything: () => write.current({ layers: '', segment: '' }),
    };
  }, [choice, open]);
}
