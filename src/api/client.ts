/** fetch with JSON in and out, problems as ApiProblem, and one event when the session has ended. */
import type { Method } from '#contract/route.ts';
import { noConnection, problemOf } from './api-problem.ts';

/** Fired on window when the server no longer knows the session; the shell then offers to sign in again. */
export const sessionEnded = 'pennyweight:session-ended';

export async function send<T>(method: Method, url: string, options: { body?: unknown; signal?: AbortSignal } = {}): Promise<T> {
  const hasBody = options.body !== undefined;
  let response: Response;
  try {
    response = await fetch(url, {
      method: method.toUpperCase(),
      credentials: 'same-origin',
      headers: { accept: 'application/json', ...(hasBody ? { 'content-type': 'application/json' } : {}) },
      body: hasBody ? JSON.stringify(options.body) : undefined,
      signal: options.signal,
    });
  } catch (cause) {
    if (options.signal?.aborted) throw cause;
    throw noConnection();
  }
  if (!response.ok) {
    const refusal = await problemOf(response);
    if (response.status === 401) window.dispatchEvent(new CustomEvent(sessionEnded, { detail: refusal.code }));
    throw refusal;
  }
  return (response.status === 204 ? null : await response.json()) as T;
}
