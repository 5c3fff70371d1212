import { useQuery } from '@tanstack/react-query';
import { useNavigate } from 'react-router-dom';
import { GeometryProvider } from '../canvas/geometry-context.tsx';
import { CommentsDesk } from '../features/review/comments-desk.tsx';
import { ReviewSide } from '../features/review/review-side.tsx';
import { useCommenting } from '../features/review/use-commenting.tsx';
import { ReleaseFacts } from '../features/revisions/release-facts.tsx';
import { usePageTitle } from '../lib/page-title.ts';
import { useSearchValues } from '../lib/use-search-values.ts';
import { designPath } from '../lib/workspace-path.ts';
import { useDesignPlace } from '../workspace/design-place.tsx';
import { openDesignQuery } from '../workspace/open-design-query.ts';
import { useOpenState } from '../workspace/open-design-context.tsx';

/** /designs/:designId/review?threads=…&whose=…&on=…&thread=…: what people say about the design, and what is decided. */
export function ReviewPage() {
  const { designId } = useDesignPlace();
  const navigate = useNavigate();
  const answer = useQuery(openDesignQuery(designId));
  const { change } = useSearchValues();
  const { ask, dialog } = useCommenting((thread) => change({ thread }));
  usePageTitle(`Review of ${useOpenState((state) => state.document.meta.title)}`);
  return (
    <main
      id="main"
      tabIndex={-1}
      className="min-h-0 flex-1 overflow-y-auto px-28 pb-28 outline-none max-sm:px-14"
    >
      <h1 className="flex min-h-62 items-center py-12 text-page font-semibold">Review</h1>
      <div className="grid grid-cols-[minmax(0,1fr)_304px] items-start gap-28 max-lg:grid-cols-1">
        <section aria-label="Comments" className="max-lg:order-last">
          <GeometryProvider>
            <CommentsDesk
              tools={{
                onShow: (_pin, thread) =>
                  void navigate(`${designPath(designId)}?drawer=comments&thread=${thread}`),
              }}
              onCommentDesign={() => ask?.({ kind: 'design' })}
            />
          </GeometryProvider>
        </section>
        <section aria-label="State of the review">
          <ReviewSide>
            {answer.data !== undefined && <ReleaseFacts summary={answer.data.summary} />}
          </ReviewSide>
        </section>
      </div>
      {dialog}
    </main>
  );
}
