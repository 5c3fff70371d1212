import { useEffect, useState } from 'react';
import { Button } from '../components/button.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { setTidying, useDesk } from './desk-state.ts';
import { tidied, useTidy } from './use-tidy.ts';

const momentMs = 500;

const giveUp = (working: AbortController): void => {
  working.abort();
  setTidying(undefined);
};

/** Lays the sheet out afresh, or only the selected site or devices. */
export function TidyButton() {
  const selection = useOpenState((state) => state.selection);
  const name = useOpenState(({ document }) => document.sites[tidied(selection).site ?? '']?.name);
  const working = useDesk((state) => state.tidying);
  const { tidy } = useTidy();
  const { devices } = tidied(selection);
  // A layout that is there in a moment needs no way out of it.
  const [showsCancel, setShowsCancel] = useState(false);
  useEffect(() => {
    if (working === undefined) return;
    const timer = setTimeout(() => setShowsCancel(true), momentMs);
    return () => {
      clearTimeout(timer);
      setShowsCancel(false);
    };
  }, [working]);
  const words =
    name !== undefined
      ? `Lay out ${name}`
      : devices.length > 0
        ? `Lay out the ${devices.length} selected devices`
        : 'Lay out the whole sheet';
  return (
    <>
      <Tooltip text={words}>
        <Button busy={working !== undefined} onClick={() => void tidy(selection)}>
          Tidy
        </Button>
      </Tooltip>
      {showsCancel && working !== undefined && (
        <Button kind="quiet" aria-label="Cancel tidying" onClick={() => giveUp(working)}>
          Cancel
        </Button>
      )}
    </>
  );
}
