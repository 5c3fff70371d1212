import { useNavigate } from 'react-router-dom';
import { GeometryProvider } from '../canvas/geometry-context.tsx';
import { ChecksDesk } from '../features/findings/checks-desk.tsx';
import { useCommenting } from '../features/review/use-commenting.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { designPath } from '../lib/workspace-path.ts';
import { useDesignPlace } from '../workspace/design-place.tsx';
import { useOpenState } from '../workspace/open-design-context.tsx';

/** /designs/:designId/checks?group=…&severity=…&rule=…&site=…&segment=…&waivers=…&q=…: everything the checks find. */
export function DesignChecksPage() {
  usePageTitle(`Checks of ${useOpenState((state) => state.document.meta.title)}`);
  const { designId } = useDesignPlace();
  const navigate = useNavigate();
  const { ask, suggestFix, dialog } = useCommenting(
    (thread) => void navigate(`${designPath(designId)}/review?thread=${thread}`),
  );
  return (
    <main
      id="main"
      tabIndex={-1}
      className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
    >
      <GeometryProvider>
        <ChecksDesk onComment={ask && ((key) => ask({ kind: 'finding', key }))} onSuggestFix={suggestFix} />
      </GeometryProvider>
      {dialog}
    </main>
  );
}
