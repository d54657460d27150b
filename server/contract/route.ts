/** The form of a route: the one place that says its method, path, inputs, answer and who may call it. */
import { z } from 'zod';
import type { Action, Subject, TokenScope } from './access.ts';

export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete';

/**
 * `access`
 *   'public'     anyone
 *   'signed-in'  anyone with a session (or a token of `scope`), the service narrows the rows
 *   {action, subject}  decided by casl on the loaded object, in the service
 */
export type RouteAccess = 'public' | 'signed-in' | { action: Action; subject: Subject };

export interface Route<P extends z.ZodType = z.ZodType, Q extends z.ZodType = z.ZodType, B extends z.ZodType = z.ZodType, R extends z.ZodType = z.ZodType> {
  method: Method;
  /** Express 5 path */
  path: string;
  summary: string;
  access: RouteAccess;
  /** personal tokens that may call it; null: session only */
  scope: TokenScope | null;
  params: P;
  query: Q;
  body: B;
  response: R;
  /** status of the successful answer */
  status: 200 | 201 | 202 | 204;
  /** media type of the answer when it is not JSON */
  media: string | null;
}

const nothing = z.object({});

type Definition<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, R extends z.ZodType> = Pick<
  Route,
  'method' | 'path' | 'summary' | 'access'
> & { scope?: TokenScope | null; params?: P; query?: Q; body?: B; response: R; status?: Route['status']; media?: string };

export function defineRoute<
  R extends z.ZodType,
  P extends z.ZodType = typeof nothing,
  Q extends z.ZodType = typeof nothing,
  B extends z.ZodType = typeof nothing,
>(definition: Definition<P, Q, B, R>): Route<P, Q, B, R> {
  return {
    scope: null,
    params: nothing as unknown as P,
    query: nothing as unknown as Q,
    body: nothing as unknown as B,
    status: 200,
    ...definition,
    media: definition.media ?? null,
  };
}

export type ParamsOf<T extends Route> = z.input<T['params']>;
export type QueryOf<T extends Route> = z.input<T['query']>;
export type BodyOf<T extends Route> = z.input<T['body']>;
export type ResponseOf<T extends Route> = z.output<T['response']>;

/** The URL of a route with its parameters and query filled in; the only way both sides make one. */
export function pathTo<T extends Route>(route: T, params?: ParamsOf<T>, query?: QueryOf<T>): string {
  const given = (params ?? {}) as Record<string, string | number>;
  const path = route.path.replace(/\/\*(\w+)|:(\w+)/g, (_, rest: string | undefined, name: string | undefined) =>
    rest ? '/' + String(given[rest]).split('/').map(encodeURIComponent).join('/') : encodeURIComponent(String(given[name!])),
  );
  const search = new URLSearchParams();
  for (const [key, value] of Object.entries((query ?? {}) as Record<string, unknown>)) {
    if (value !== undefined && value !== null && value !== '') search.set(key, Array.isArray(value) ? value.join(',') : String(value));
  }
  const text = search.toString();
  return text ? `${path}?${text}` : path;
}
