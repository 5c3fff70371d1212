import type { ReactNode } from 'react';
import { BarContents } from '../components/bar.tsx';
import { Button } from '../components/button.tsx';
import { Icon } from '../components/icon.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import { useOpenState } from '../workspace/open-design-context.tsx';
import { keyWords } from './commands/shortcuts.ts';
import { setInspecting, setListingKeys, useDesk } from './desk-state.ts';
import { TidyButton } from './tidy-button.tsx';

/** What the sheet adds to the design's bar: tidying, keys, the inspector, and last its one primary action. */
export function SheetActions({ children }: { readonly children: ReactNode }) {
  const editable = useOpenState((state) => state.editable);
  return (
    <BarContents>
      <div className="flex shrink-0 items-center gap-4 pl-4">
        {editable && <TidyButton />}
        <KeysButton />
        <InspectorButton />
        {children}
      </div>
    </BarContents>
  );
}

function KeysButton() {
  return (
    <Tooltip text={`All keys (${keyWords('keys')})`}>
      <Button
        kind="quiet"
        iconOnly
        aria-label="All keys"
        icon={<Icon name="keys" />}
        className="max-md:hidden"
        onClick={() => setListingKeys(true)}
      />
    </Tooltip>
  );
}

function InspectorButton() {
  const inspecting = useDesk((state) => state.inspecting);
  return (
    <Tooltip text={inspecting ? 'Put the inspector away' : 'Show the inspector'}>
      <Button
        kind="quiet"
        iconOnly
        aria-label="Show the inspector"
        aria-expanded={inspecting}
        icon={<Icon name="panel" />}
        onClick={() => setInspecting(!inspecting)}
      />
    </Tooltip>
  );
}
