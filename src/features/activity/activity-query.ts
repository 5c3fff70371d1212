import { infiniteQueryOptions } from '@tanstack/react-query';
import { activityPageSchema } from '../../contract/activity.ts';
import { callApi } from '../../lib/api-client.ts';

export const filterNames = ['person', 'action', 'design', 'from', 'to'] as const;
export type FilterName = (typeof filterNames)[number];
/** As the address has it; '' where nothing is asked for. */
export type ActivityWish = Readonly<Record<FilterName, string>>;

const noWish: Record<FilterName, string> = { person: '', action: '', design: '', from: '', to: '' };

export function wishFrom(valueOf: (name: FilterName) => string): ActivityWish {
  const wish = { ...noWish };
  for (const name of filterNames) wish[name] = valueOf(name);
  return wish;
}

export const isNarrowed = (wish: ActivityWish): boolean => filterNames.some((name) => wish[name] !== '');

const searchOf = (wish: ActivityWish, before?: string): string => {
  const params = new URLSearchParams(Object.entries(wish).filter(([, value]) => value !== ''));
  if (before !== undefined) params.set('before', before);
  return params.size === 0 ? '' : `?${params.toString()}`;
};

/** Where the whole of it comes as a file. */
export const csvAddress = (workspaceId: string, wish: ActivityWish): string =>
  `/api/workspaces/${workspaceId}/activity.csv${searchOf(wish)}`;

export const activityQuery = (workspaceId: string, wish: ActivityWish) =>
  infiniteQueryOptions({
    queryKey: ['activity', workspaceId, wish],
    queryFn: ({ signal, pageParam }) =>
      callApi(activityPageSchema, `/api/workspaces/${workspaceId}/activity${searchOf(wish, pageParam)}`, {
        signal,
      }),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: ({ next }) => next ?? undefined,
    // Others go on meanwhile.
    staleTime: 0,
  });
