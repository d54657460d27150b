/** How answers are kept and when a question is asked again. */
import { QueryClient } from '@tanstack/react-query';
import { ApiProblem } from '../api/api-problem.ts';

/** A refusal stays a refusal: only lost connections and failing servers are asked again. */
export function asksAgain(failures: number, error: Error): boolean {
  return failures < 2 && (!(error instanceof ApiProblem) || error.problem.status === 0 || error.problem.status >= 500);
}

export const queryClient = new QueryClient({ defaultOptions: { queries: { staleTime: 5_000, retry: asksAgain } } });
