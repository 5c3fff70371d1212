import { queryOptions } from '@tanstack/react-query';
import { openDesignSchema } from '../contract/designs.ts';
import { callApi } from '../lib/api-client.ts';

/** A design as it is opened. Read once: from then on the open design keeps itself up to date. */
export const openDesignQuery = (designId: string) =>
  queryOptions({
    queryKey: ['open-design', designId],
    queryFn: ({ signal }) =>
      callApi(openDesignSchema, `/api/designs/${encodeURIComponent(designId)}`, { signal }),
    staleTime: Infinity,
    gcTime: 0,
    refetchOnWindowFocus: false,
  });
