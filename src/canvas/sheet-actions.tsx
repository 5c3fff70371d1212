import { useState } from 'react';
import { BarContents } from '../components/bar.tsx';
import { Button } from '../components/button.tsx';
import { Icon } from '../components/icon.tsx';
import { Menu } from '../components/menu.tsx';
import { showToast } from '../components/toast.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import { download } from '../lib/download.ts';
import { useTheme } from '../lib/theme.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { keyWords } from './commands/shortcuts.ts';
import { setInspecting, setListingKeys, useDesk } from './desk-state.ts';
import { designBlob, fileNameOf, sheetPng } from './export-sheet.ts';
import { TidyButton } from './tidy-button.tsx';

/** What the sheet adds to the design's bar: tidying, the inspector, what can be taken away. */
export function SheetActions() {
  const editable = useOpenState((state) => state.editable);
  return (
    <BarContents>
      <div className="flex shrink-0 items-center gap-4 pl-4">
        {editable && <TidyButton />}
        <KeysButton />
        <InspectorButton />
        <ExportMenu />
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

function ExportMenu() {
  const open = useOpenDesign();
  const theme = useTheme();
  const [busy, setBusy] = useState(false);
  const picture = async (as: 'paper' | 'slate' | 'print', scale: number): Promise<void> => {
    setBusy(true);
    const { document } = open.store.getState();
    try {
      download(fileNameOf(document, 'png'), await sheetPng(document, { theme: as, scale }));
    } catch (error) {
      showToast({
        tone: 'failed',
        text: error instanceof Error ? error.message : 'The picture could not be made.',
      });
    } finally {
      setBusy(false);
    }
  };
  return (
    <Menu
      align="end"
      trigger={
        <Button kind="primary" busy={busy}>
          Export
        </Button>
      }
      groups={[
        {
          actions: [
            { label: 'Picture as on screen', detail: 'PNG, 2×', onSelect: () => void picture(theme, 2) },
            { label: 'Picture on paper', detail: 'PNG, 2×', onSelect: () => void picture('paper', 2) },
            {
              label: 'Picture in black on white',
              detail: 'PNG, 3×',
              onSelect: () => void picture('print', 3),
            },
          ],
        },
        {
          actions: [
            {
              label: 'The design itself',
              detail: 'JSON',
              onSelect: () => {
                const { document } = open.store.getState();
                download(fileNameOf(document, 'json'), designBlob(document));
              },
            },
          ],
        },
      ]}
    />
  );
}
