import { QueryClient } from '@tanstack/react-query';
import { ApiError } from './api-error.ts';

const maxRetries = 2;

/** The cache of what the server said. Only a server that cannot be reached is asked again unbidden. */
export function createQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 10_000,
        retry: (failures, error) =>
          error instanceof ApiError && error.code === 'unavailable' && failures < maxRetries,
      },
      mutations: { retry: false, networkMode: 'always' },
    },
  });
}
