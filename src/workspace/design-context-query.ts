import { queryOptions } from '@tanstack/react-query';
import { designContextSchema } from '../contract/numbering.ts';
import { callApi } from '../lib/api-client.ts';

/** Pools, and the numbers of the workspace's other designs; read again whenever the window comes to the front. */
export const designContextQuery = (designId: string) =>
  queryOptions({
    queryKey: ['design-context', designId],
    queryFn: ({ signal }) =>
      callApi(designContextSchema, `/api/designs/${encodeURIComponent(designId)}/context`, { signal }),
  });
