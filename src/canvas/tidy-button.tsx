import { Button } from '../components/button.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { useDesk } from './desk-state.ts';
import { tidied, useTidy } from './use-tidy.ts';

/** Lays the sheet out afresh, or only the selected site or devices. */
export function TidyButton() {
  const selection = useOpenState((state) => state.selection);
  const name = useOpenState(({ document }) => document.sites[tidied(selection).site ?? '']?.name);
  const busy = useDesk((state) => state.tidying);
  const { tidy } = useTidy();
  const { devices } = tidied(selection);
  const words =
    name !== undefined
      ? `Lay out ${name}`
      : devices.length > 0
        ? `Lay out the ${devices.length} selected devices`
        : 'Lay out the whole sheet';
  return (
    <Tooltip text={words}>
      <Button busy={busy} onClick={() => void tidy(selection)}>
        Tidy
      </Button>
    </Tooltip>
  );
}
