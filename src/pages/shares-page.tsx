import { Link } from 'react-router-dom';
import { buttonClasses } from '../components/button.tsx';
import { EmptyState } from '../components/empty-state.tsx';
import { SharesDesk } from '../features/sharing/shares-desk.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { may, useMembership } from '../lib/session.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { designPath } from '../lib/workspace-path.ts';
import { useDesignPlace } from '../workspace/design-place.tsx';
import { useOpenState } from '../workspace/open-design-context.tsx';

/** /designs/:designId/shares?revision=…: links by which guests see revisions. */
export function SharesPage() {
  const { designId, workspaceId } = useDesignPlace();
  const membership = useMembership(workspaceId);
  const { valueOf } = useSearchValues();
  const asked = valueOf('revision');
  usePageTitle(`Links to ${useOpenState((state) => state.document.meta.title)}`);
  return (
    <main
      id="main"
      tabIndex={-1}
      className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
    >
      <div className="flex min-h-62 flex-wrap items-center justify-between gap-x-24 gap-y-10 py-12">
        <h1 className="text-page font-semibold">Links for guests</h1>
        <Link to={`${designPath(designId)}/history`} className={buttonClasses({ small: true })}>
          History
        </Link>
      </div>
      {may(membership, 'share.manage') ? (
        <SharesDesk designId={designId} asked={asked === '' ? undefined : asked} />
      ) : (
        <EmptyState title="For owners, architects and presales">
          They make links that show a revision to guests, and end them.
        </EmptyState>
      )}
    </main>
  );
}
