/** Providers around the routes. */
import { useEffect } from 'react';
import { QueryClientProvider } from '@tanstack/react-query';
import { RouterProvider } from 'react-router-dom';
import { watchForms } from './first-problem.ts';
import { queryClient } from './query-client.ts';
import { router } from './router.tsx';

export function App() {
  useEffect(() => watchForms(document), []);
  return (
    <QueryClientProvider client={queryClient}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  );
}
