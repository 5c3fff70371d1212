import { useCallback } from 'react';
import { showToast } from '../components/toast.tsx';
import { drawSheet } from '../drawing/sheets/draw-sheet.ts';
import type { ElementRef } from '../engine/model/design.ts';
import { applyPatch } from '../engine/model/merge-patch.ts';
import { useOpenDesign } from '../workspace/open-design-context.tsx';
import { setTidying, useDesk } from './desk-state.ts';
import { layOut } from './elk/lay-out.ts';
import { tidyInWorker } from './tidy-in-worker.ts';
import { tidyDevices, tidyOneSite, tidySheet } from './tidy-sheet.ts';
import { useView } from './use-view.ts';

/** The part of a selection that can be laid out by itself: one site, or several devices. */
export const tidied = (
  refs: readonly ElementRef[],
): { readonly site?: string; readonly devices: readonly string[] } => {
  const [first] = refs;
  if (first?.collection === 'sites' && refs.length === 1) return { site: first.id, devices: [] };
  const devices = refs.filter(({ collection, port }) => collection === 'devices' && port === undefined);
  return { devices: devices.length > 1 ? devices.map(({ id }) => id) : [] };
};

/** Lays out a site, some devices, or with neither the whole sheet. One step, to be undone like any other. */
export function useTidy(): { readonly tidy: (refs: readonly ElementRef[]) => Promise<void> } {
  const open = useOpenDesign();
  const view = useView();
  const { fit } = view;
  const tidy = useCallback(
    async function tidy(refs: readonly ElementRef[]): Promise<void> {
      if (useDesk.getState().tidying !== undefined) return;
      const working = new AbortController();
      const { signal } = working;
      setTidying(working);
      const { document } = open.store.getState();
      const { site, devices } = tidied(refs);
      try {
        const patch =
          site !== undefined
            ? await tidyOneSite(document, site, layOut)
            : devices.length > 0
              ? await tidyDevices(document, devices, layOut)
              : await tidySheet(document, layOut, tidyInWorker, signal);
        if (signal.aborted) return;
        if (open.store.getState().document !== document) {
          showToast({
            tone: 'other',
            text: 'The design changed while its layout was worked out, so nothing was moved.',
            action: { label: 'Tidy again', onSelect: () => void tidy(refs) },
          });
          return;
        }
        const label =
          site !== undefined
            ? `Tidy ${document.sites[site]?.name ?? 'the site'}`
            : devices.length > 0
              ? 'Tidy the selection'
              : 'Tidy';
        const done = open.commit(label, patch);
        if (!done.ok)
          showToast({ tone: 'failed', text: done.problems.map((problem) => problem.expected).join('; ') });
        else if (site === undefined && devices.length === 0)
          fit(drawSheet(applyPatch(document, patch)).sheet);
      } catch {
        if (signal.aborted) return;
        showToast({
          tone: 'failed',
          text: 'The layout could not be worked out. Check your connection and try again.',
        });
      } finally {
        if (useDesk.getState().tidying === working) setTidying(undefined);
      }
    },
    [open, fit],
  );
  return { tidy };
}
