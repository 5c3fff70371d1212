import { QueryClientProvider } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { createBrowserRouter, RouterProvider } from 'react-router-dom';
import { ToastRegion } from '../components/toast.tsx';
import { TooltipProvider } from '../components/tooltip.tsx';
import { onSessionEnded } from '../lib/api-client.ts';
import { createQueryClient } from '../lib/query-client.ts';
import { sessionQuery } from '../lib/session.ts';
import { routes } from './routes.tsx';

export function App() {
  const [queryClient] = useState(createQueryClient);
  const [router] = useState(() => createBrowserRouter(routes));
  useEffect(
    () => onSessionEnded(() => void queryClient.invalidateQueries({ queryKey: sessionQuery.queryKey })),
    [queryClient],
  );
  return (
    <QueryClientProvider client={queryClient}>
      <TooltipProvider>
        <RouterProvider router={router} />
        <ToastRegion />
      </TooltipProvider>
    </QueryClientProvider>
  );
}
