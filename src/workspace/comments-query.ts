import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import {
  appliedSuggestionSchema,
  commentListSchema,
  threadSchema,
  type WriteComment,
} from '../contract/comments.ts';
import { callApi, callApiForNothing } from '../lib/api-client.ts';

const commentPath = (commentId: string): string => `/api/comments/${encodeURIComponent(commentId)}`;
const commentsPath = (designId: string): string => `/api/designs/${encodeURIComponent(designId)}/comments`;

export const commentsQuery = (designId: string) =>
  queryOptions({
    queryKey: ['comments', designId],
    queryFn: ({ signal }) => callApi(commentListSchema, commentsPath(designId), { signal }),
  });

/** A change after which a design's comments are read again; it is done when they are. */
function useCommentChange<Input, Answer>(designId: string, change: (input: Input) => Promise<Answer>) {
  const queryClient = useQueryClient();
  return useMutation({
    mutationFn: change,
    onSettled: () => queryClient.invalidateQueries({ queryKey: commentsQuery(designId).queryKey }),
  });
}

export const useWriteComment = (designId: string) =>
  useCommentChange(designId, (body: WriteComment) =>
    callApi(threadSchema, commentsPath(designId), { method: 'POST', body }),
  );

export const useChangeComment = (designId: string) =>
  useCommentChange(designId, ({ commentId, body }: { readonly commentId: string; readonly body: string }) =>
    callApi(threadSchema, commentPath(commentId), { method: 'PATCH', body: { body } }),
  );

export const useDeleteComment = (designId: string) =>
  useCommentChange(designId, (commentId: string) =>
    callApiForNothing(commentPath(commentId), { method: 'DELETE' }),
  );

export const useResolveThread = (designId: string) =>
  useCommentChange(
    designId,
    ({ threadId, resolved }: { readonly threadId: string; readonly resolved: boolean }) =>
      callApi(threadSchema, `${commentPath(threadId)}/resolution`, { method: resolved ? 'POST' : 'DELETE' }),
  );

interface Application {
  readonly commentId: string;
  readonly editId: string;
  readonly confirmed: boolean;
}

export const useApplySuggestion = (designId: string) =>
  useCommentChange(designId, ({ commentId, editId, confirmed }: Application) =>
    callApi(appliedSuggestionSchema, `${commentPath(commentId)}/application`, {
      method: 'POST',
      body: { editId, ...(confirmed ? { confirmed } : {}) },
    }),
  );
