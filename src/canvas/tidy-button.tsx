import { useState } from 'react';
import { Button } from '../components/button.tsx';
import { showToast } from '../components/toast.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import { route } from '../drawing/routing/route.ts';
import { applyPatch } from '../engine/model/merge-patch.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { layOut } from './elk/lay-out.ts';
import { tidyDevices, tidySheet } from './tidy-sheet.ts';
import { useView } from './use-view.ts';

/** Lays the sheet out afresh, or only the selected devices. One step, to be undone like any other. */
export function TidyButton() {
  const open = useOpenDesign();
  const view = useView();
  const devices = useOpenState((state) => state.selection).filter(
    (ref) => ref.collection === 'devices' && ref.port === undefined,
  );
  const some = devices.length > 1;
  const [busy, setBusy] = useState(false);
  const tidy = async (): Promise<void> => {
    setBusy(true);
    const { document } = open.store.getState();
    try {
      const patch = some
        ? await tidyDevices(
            document,
            devices.map((ref) => ref.id),
            layOut,
          )
        : await tidySheet(document, layOut);
      const done = open.commit(some ? 'Tidy the selection' : 'Tidy', patch);
      if (!done.ok)
        showToast({ tone: 'failed', text: done.problems.map((problem) => problem.expected).join('; ') });
      else if (!some) view.fit(route(applyPatch(document, patch)).sheet);
    } catch {
      showToast({
        tone: 'failed',
        text: 'The layout could not be worked out. Check your connection and try again.',
      });
    } finally {
      setBusy(false);
    }
  };
  return (
    <Tooltip text={some ? `Lay out the ${devices.length} selected devices` : 'Lay out the whole sheet'}>
      <Button busy={busy} onClick={() => void tidy()}>
        Tidy
      </Button>
    </Tooltip>
  );
}
