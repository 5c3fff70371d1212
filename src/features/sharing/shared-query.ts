import { queryOptions } from '@tanstack/react-query';
import { openedShareSchema } from '../../contract/shares.ts';
import { callApi, postForFile } from '../../lib/api-client.ts';

/** What a guest has in hand. */
export interface ShareKey {
  readonly token: string;
  readonly passphrase?: string;
}

/** What a link shows; each reading counts as a view, so it is read once. */
export const sharedQuery = (key: ShareKey) =>
  queryOptions({
    queryKey: ['share', key.token, key.passphrase ?? ''],
    queryFn: ({ signal }) => callApi(openedShareSchema, '/api/share', { method: 'POST', body: key, signal }),
    staleTime: Infinity,
    retry: false,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });

/** One of its sheets as SVG. */
export const sharedSheetQuery = (key: ShareKey, look: 'paper' | 'slate', sheet: number) =>
  queryOptions({
    queryKey: ['share-sheet', key.token, key.passphrase ?? '', look, sheet],
    queryFn: async ({ signal }) =>
      (await postForFile('/api/share/sheet', { ...key, look, sheet }, signal)).text(),
    staleTime: Infinity,
    retry: false,
    refetchOnWindowFocus: false,
  });
