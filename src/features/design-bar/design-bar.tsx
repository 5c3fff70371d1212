import type { ReactNode } from 'react';
import { Link, useLocation, useNavigate } from 'react-router-dom';
import { BarCell, BarContents, BarNav, type BarDestination } from '../../components/bar.tsx';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { Stamp } from '../../components/stamp.tsx';
import { Tooltip } from '../../components/tooltip.tsx';
import type { DesignSummary } from '../../contract/designs.ts';
import { engagementsPath } from '../../lib/workspace-path.ts';
import { useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { designPages } from './design-pages.ts';
import { SaveCell } from './save-cell.tsx';

interface DesignBarProps {
  readonly engagementName: string;
  readonly workspaceId: string;
  readonly summary: DesignSummary;
  /** Who else has it open. */
  readonly people?: ReactNode;
  /** What can be done with its revision, beside the stamp. */
  readonly release?: ReactNode;
}

/** The bar over every page of a design: where it belongs, whether it is saved, its pages, undo. A page adds its own. */
export function DesignBar({ engagementName, workspaceId, summary, people, release }: DesignBarProps) {
  const title = useOpenState((state) => state.document.meta.title);
  const revision = useOpenState((state) => state.document.meta.revision);
  const editable = useOpenState((state) => state.editable);
  const pages = designPages(summary.id);
  return (
    <BarContents>
      <BarCell label="Engagement" className="max-xl:hidden">
        <Link to={engagementsPath(workspaceId)} className="hover:underline">
          {engagementName}
        </Link>
      </BarCell>
      <BarCell label="Design" className="min-w-78! shrink!">
        <span className="max-w-260 truncate">{title}</span>
      </BarCell>
      <BarCell label="Revision" className="max-xl:hidden">
        <Stamp state={summary.state} prefix={revision} />
        {release}
      </BarCell>
      <SaveCell />
      <div className="flex shrink-0 max-md:hidden">
        <BarNav label="Design" destinations={pages} />
      </div>
      <div className="flex shrink-0 items-center pl-8 md:hidden">
        <PagesMenu pages={pages} />
      </div>
      <div className="ml-auto flex shrink-0 items-center gap-8 not-empty:pl-8">{people}</div>
      <div className="flex shrink-0 items-center gap-4 not-empty:pl-8">{editable && <Travel />}</div>
    </BarContents>
  );
}

/** The pages where the bar has no room for them side by side. */
function PagesMenu({ pages }: { readonly pages: readonly BarDestination[] }) {
  const navigate = useNavigate();
  const { pathname } = useLocation();
  return (
    <Menu
      align="end"
      trigger={
        <Button small icon={<Icon name="chevron-down" size={13} />} className="flex-row-reverse">
          {pages.find(({ to }) => to === pathname.replace(/\/$/, ''))?.label ?? 'Pages'}
        </Button>
      }
      groups={[{ actions: pages.map(({ to, label }) => ({ label, onSelect: () => void navigate(to) })) }]}
    />
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
