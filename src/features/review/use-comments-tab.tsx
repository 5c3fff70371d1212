import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { DeskTab } from '../../canvas/desk-tab.ts';
import { useDrawn } from '../../canvas/geometry-context.tsx';
import { elementKey, type Decorations } from '../../drawing/decorations.ts';
import type { ElementRef } from '../../engine/model/design.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { commentsQuery } from '../../workspace/comments-query.ts';
import { useDesignPlace } from '../../workspace/design-place.tsx';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { commentFlags } from './comment-flags.ts';
import { CommentsDesk } from './comments-desk.tsx';
import { placeOfPin, refOfPin } from './filter-threads.ts';
import type { Commenting } from './use-commenting.tsx';

interface CommentsTab {
  readonly tab: DeskTab;
  /** Slips for the sheet, whatever tab is open. */
  readonly flags: Decorations['flags'];
  /** Opens what a slip stands for. */
  readonly onPickFlag: (ref: ElementRef) => void;
}

/** The drawer's tab of comments, and their slips on the sheet. */
export function useCommentsTab(
  { ask }: Pick<Commenting, 'ask'>,
  onShowElement: (ref: ElementRef) => void,
): CommentsTab {
  const { designId } = useDesignPlace();
  const document = useOpenState((state) => state.document);
  const { setPreview } = useDrawn();
  const { change } = useSearchValues();
  const { data } = useQuery(commentsQuery(designId));
  const threads = useMemo(() => data?.threads ?? [], [data]);
  const flags = useMemo(() => commentFlags(threads, document), [threads, document]);
  const open = threads.filter(({ resolvedAt }) => resolvedAt === null);
  return {
    flags,
    onPickFlag: (ref) => {
      const here = open.filter(({ pin }) => placeOfPin(pin) === elementKey(ref));
      const [only] = here;
      change({
        drawer: 'comments',
        threads: '',
        whose: '',
        on: elementKey(ref),
        thread: here.length === 1 && only !== undefined ? only.id : '',
      });
    },
    tab: {
      value: 'comments',
      label: 'Comments',
      count: open.length,
      usualHeightPx: 300,
      panel: (
        <div className="p-14">
          <CommentsDesk
            tools={{
              onShow: (pin) => {
                const ref = refOfPin(pin);
                if (ref !== undefined) onShowElement(ref);
              },
              onPreview: setPreview,
            }}
            onCommentDesign={() => ask?.({ kind: 'design' })}
          />
        </div>
      ),
    },
  };
}
