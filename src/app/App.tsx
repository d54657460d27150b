/** Providers around the routes. */
import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { RouterProvider } from 'react-router-dom';
import { ApiProblem } from '../api/api-problem.ts';
import { router } from './router.tsx';

/** A refusal stays a refusal: only lost connections and failing servers are asked again. */
const queries = new QueryClient({
  defaultOptions: {
    queries: { staleTime: 5_000, retry: (failures, error) => failures < 2 && (!(error instanceof ApiProblem) || error.problem.status === 0 || error.problem.status >= 500) },
  },
});

export function App() {
  return (
    <QueryClientProvider client={queries}>
      <RouterProvider router={router} />
    </QueryClientProvider>
  );
}
