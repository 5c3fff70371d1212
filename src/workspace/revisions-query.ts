import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import { designSummarySchema } from '../contract/designs.ts';
import {
  frozenRevisionSchema,
  restoredSchema,
  revisionListSchema,
  revisionSchema,
  type AskForReview,
  type Decide,
  type Restore,
} from '../contract/revisions.ts';
import { callApi } from '../lib/api-client.ts';
import { useOpenDesign } from './open-design-context.tsx';

const designPart = (designId: string, part: string): string =>
  `/api/designs/${encodeURIComponent(designId)}/${part}`;
const revisionPart = (revisionId: string, part: string): string =>
  `/api/revisions/${encodeURIComponent(revisionId)}/${part}`;

/** A design's revisions, the newest first. */
export const revisionsQuery = (designId: string) =>
  queryOptions({
    queryKey: ['revisions', designId],
    queryFn: ({ signal }) => callApi(revisionListSchema, designPart(designId, 'revisions'), { signal }),
    select: ({ revisions }) => revisions,
  });

/** A revision with all that was frozen; its document never changes, its state may. */
export const frozenRevisionQuery = (revisionId: string) =>
  queryOptions({
    queryKey: ['revision', revisionId],
    queryFn: ({ signal }) =>
      callApi(frozenRevisionSchema, `/api/revisions/${encodeURIComponent(revisionId)}`, { signal }),
  });

/** A move of the open design or of one of its revisions, after which both are read again. */
function useMove<Input, Answer>(designId: string, move: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  const open = useOpenDesign();
  return useMutation({
    mutationFn: move,
    onSettled: async () => {
      await open.catchUp();
      await Promise.all(
        [
          ['open-design', designId],
          ['revisions', designId],
          ['sittings', designId],
          ['revision'],
          ['engagements'],
        ].map((queryKey) => queryClient.invalidateQueries({ queryKey })),
      );
    },
  });
}

export const useAskForReview = (designId: string) =>
  useMove(designId, (body: AskForReview) =>
    callApi(revisionSchema, designPart(designId, 'revisions'), { method: 'POST', body }),
  );

export const useTakeBack = (designId: string) =>
  useMove(designId, (revisionId: string) =>
    callApi(revisionSchema, revisionPart(revisionId, 'withdrawal'), { method: 'POST' }),
  );

export const useDecide = (designId: string) =>
  useMove(designId, ({ revisionId, ...body }: Decide & { readonly revisionId: string }) =>
    callApi(revisionSchema, revisionPart(revisionId, 'decision'), { method: 'POST', body }),
  );

export const useMarkBuilt = (designId: string) =>
  useMove(designId, ({ revisionId, ...body }: { readonly revisionId: string; readonly builtOn: string }) =>
    callApi(revisionSchema, revisionPart(revisionId, 'build'), { method: 'POST', body }),
  );

export const useSupersede = (designId: string) =>
  useMove(designId, ({ revisionId, ...body }: { readonly revisionId: string; readonly reason: string }) =>
    callApi(revisionSchema, revisionPart(revisionId, 'supersession'), { method: 'POST', body }),
  );

export const useStartNextRevision = (designId: string) =>
  useMove(designId, () => callApi(designSummarySchema, designPart(designId, 'draft'), { method: 'POST' }));

export const useRestore = (designId: string) =>
  useMove(designId, (body: Restore) =>
    callApi(restoredSchema, designPart(designId, 'restoration'), { method: 'POST', body }),
  );
