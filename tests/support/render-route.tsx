import { QueryClientProvider } from '@tanstack/react-query';
import { render } from '@testing-library/react';
import userEvent, { type UserEvent } from '@testing-library/user-event';
import { createMemoryRouter, RouterProvider } from 'react-router-dom';
import { routes } from '../../src/app/routes.tsx';
import { ToastRegion } from '../../src/components/toast.tsx';
import { TooltipProvider } from '../../src/components/tooltip.tsx';
import { onSessionEnded } from '../../src/lib/api-client.ts';
import { createQueryClient } from '../../src/lib/query-client.ts';
import { sessionQuery } from '../../src/lib/session.ts';

interface Rendered {
  readonly user: UserEvent;
  /** Where the reader is now, with what follows the '?'. */
  readonly address: () => string;
}

/** The application at an address, as a reader would have it after typing it in. */
export function renderRoute(path: string): Rendered {
  const queryClient = createQueryClient();
  // A test that waits for a failure shouldn't wait for second tries.
  queryClient.setDefaultOptions({ queries: { ...queryClient.getDefaultOptions().queries, retry: false } });
  onSessionEnded(() => void queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey }));
  const router = createMemoryRouter(routes, { initialEntries: [path] });
  const user = userEvent.setup();
  render(
    <QueryClientProvider client={queryClient}>
      <TooltipProvider>
        <RouterProvider router={router} />
        <ToastRegion />
      </TooltipProvider>
    </QueryClientProvider>,
  );
  return { user, address: () => `${router.state.location.pathname}${router.state.location.search}` };
}
