import { useState } from 'react';
import { Link } from 'react-router-dom';
import { BarCell, BarContents, BarNav } from '../components/bar.tsx';
import { Button } from '../components/button.tsx';
import { Icon } from '../components/icon.tsx';
import { Menu } from '../components/menu.tsx';
import { Stamp } from '../components/stamp.tsx';
import { showToast } from '../components/toast.tsx';
import { Tooltip } from '../components/tooltip.tsx';
import type { DesignSummary } from '../contract/designs.ts';
import { designPath, engagementsPath } from '../lib/workspace-path.ts';
import { useTheme } from '../lib/theme.ts';
import { useOpenDesign, useOpenState } from '../workspace/open-design-context.tsx';
import { setInspecting, useDesk } from './desk-state.ts';
import { designBlob, download, fileNameOf, sheetPng } from './export-sheet.ts';
import { SaveCell } from './save-cell.tsx';
import { TidyButton } from './tidy-button.tsx';

interface SheetBarProps {
  readonly engagementName: string;
  readonly workspaceId: string;
  readonly summary: DesignSummary;
}

/** The bar over a sheet: where it belongs, whether it is saved, what can be taken away. */
export function SheetBar({ engagementName, workspaceId, summary }: SheetBarProps) {
  const title = useOpenState((state) => state.document.meta.title);
  const revision = useOpenState((state) => state.document.meta.revision);
  const editable = useOpenState((state) => state.editable);
  return (
    <BarContents>
      <BarCell label="Engagement" className="max-lg:hidden">
        <Link to={engagementsPath(workspaceId)} className="hover:underline">
          {engagementName}
        </Link>
      </BarCell>
      <BarCell label="Design" className="min-w-0 shrink">
        <span className="max-w-260 truncate">{title}</span>
      </BarCell>
      <BarCell label="Revision" className="max-lg:hidden">
        <Stamp state={summary.state} prefix={revision} />
      </BarCell>
      <SaveCell />
      <div className="flex max-md:hidden">
        <BarNav
          label="Design"
          destinations={[
            { to: designPath(summary.id), label: 'Sheet', end: true },
            { to: '/checks', label: 'Checks' },
          ]}
        />
      </div>
      <div className="ml-auto flex items-center gap-4 pl-8">
        {editable && <Travel />}
        {editable && <TidyButton />}
        <InspectorButton />
        <ExportMenu />
      </div>
    </BarContents>
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

function Travel() {
  const open = useOpenDesign();
  const done = useOpenState((state) => state.history.done.at(-1)?.label);
  const undone = useOpenState((state) => state.history.undone.at(-1)?.label);
  return (
    <>
      <Tooltip text={done === undefined ? 'Nothing to undo' : `Undo: ${done}`}>
        <Button
          kind="quiet"
          iconOnly
          aria-label="Undo"
          disabled={done === undefined}
          icon={<Icon name="undo" />}
          onClick={() => open.undo()}
        />
      </Tooltip>
      <Tooltip text={undone === undefined ? 'Nothing to do again' : `Do again: ${undone}`}>
        <Button
          kind="quiet"
          iconOnly
          aria-label="Redo"
          disabled={undone === undefined}
          icon={<Icon name="redo" />}
          onClick={() => open.redo()}
        />
      </Tooltip>
    </>
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
