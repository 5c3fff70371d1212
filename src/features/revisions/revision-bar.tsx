import { Link } from 'react-router-dom';
import { BarCell, BarContents } from '../../components/bar.tsx';
import { buttonClasses } from '../../components/button.tsx';
import { Stamp } from '../../components/stamp.tsx';
import type { FrozenRevision } from '../../contract/revisions.ts';
import { may, useMembership } from '../../lib/session.ts';
import { designPath, engagementsPath } from '../../lib/workspace-path.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { stampOf } from './revision-words.ts';

/** The bar over a frozen revision: what it is of, which it is, and the way to the design for those who may open that. */
export function RevisionBar({
  frozen: { revision, engagementName, workspaceId },
}: {
  readonly frozen: FrozenRevision;
}) {
  const title = useOpenState((state) => state.document.meta.title);
  const membership = useMembership(workspaceId);
  return (
    <BarContents>
      <BarCell label="Engagement" className="max-lg:hidden">
        <Link to={engagementsPath(workspaceId)} className="hover:underline">
          {engagementName}
        </Link>
      </BarCell>
      <BarCell label="Design" className="min-w-78! shrink!">
        <span className="max-w-260 truncate">{title}</span>
      </BarCell>
      <BarCell label="Revision" className="max-sm:hidden">
        <Stamp state={stampOf(revision.state)} prefix={revision.label} />
      </BarCell>
      <BarCell label="Access" className="max-md:hidden">
        Read only
      </BarCell>
      {may(membership, 'design.read') && (
        <div className="ml-auto flex shrink-0 items-center gap-8 pl-8 max-sm:hidden">
          {may(membership, 'share.manage') && isShareable(revision.state) && (
            <Link
              to={`${designPath(revision.designId)}/shares?revision=${revision.id}`}
              className={buttonClasses({ small: true })}
            >
              Share…
            </Link>
          )}
          <Link to={`${designPath(revision.designId)}/history`} className={buttonClasses({ small: true })}>
            History
          </Link>
          <Link to={designPath(revision.designId)} className={buttonClasses({ small: true })}>
            Open the design
          </Link>
        </div>
      )}
    </BarContents>
  );
}

const isShareable = (state: FrozenRevision['revision']['state']): boolean =>
  state === 'in-review' || state === 'approved' || state === 'built';
