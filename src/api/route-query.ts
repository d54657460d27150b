/**
 * The one way from a page to the server: queries and mutations made from the contract's routes. Keys, URLs and types come from
 * the route, so that no feature writes any of them by hand.
 */
import { queryOptions, useMutation, useQuery, useQueryClient, type UseQueryOptions } from '@tanstack/react-query';
import { pathTo, type BodyOf, type ParamsOf, type QueryOf, type ResponseOf, type Route } from '#contract/route.ts';
import { routes, type RouteName } from '#contract/routes.ts';
import type { ApiProblem } from './api-problem.ts';
import { send } from './client.ts';

const nameOf = new Map<Route, RouteName>((Object.entries(routes) as [RouteName, Route][]).map(([name, route]) => [route, name]));

/** Key of a route's answer; without params: of all its answers. */
export function routeKey(route: Route, params?: unknown, query?: unknown): readonly unknown[] {
  const name = nameOf.get(route);
  return params === undefined ? [name] : [name, params, query ?? {}];
}

/** Query options for a GET route: for useQuery, loaders and prefetching. */
export function routeQuery<T extends Route>(route: T, params?: ParamsOf<T>, query?: QueryOf<T>) {
  return queryOptions<ResponseOf<T>, ApiProblem>({
    queryKey: routeKey(route, params ?? {}, query),
    queryFn: ({ signal }) => send<ResponseOf<T>>(route.method, pathTo(route, params, query), { signal }),
  });
}

type Extra<T extends Route> = Partial<Pick<UseQueryOptions<ResponseOf<T>, ApiProblem>, 'enabled' | 'refetchInterval' | 'placeholderData' | 'staleTime'>>;

/** `const { data, error } = useRoute(routes.getArchive, { archive })` */
export function useRoute<T extends Route>(route: T, params?: ParamsOf<T>, query?: QueryOf<T>, extra: Extra<T> = {}) {
  return useQuery({ ...routeQuery(route, params, query), ...extra });
}

export interface Order<T extends Route> {
  params?: ParamsOf<T>;
  query?: QueryOf<T>;
  body?: BodyOf<T>;
}

/**
 * A change. `touches` names the routes whose answers are out of date afterwards.
 * `const waive = useRouteMutation(routes.waiveFinding, [routes.listArchiveFindings]); waive.mutate({ params, body })`
 */
export function useRouteMutation<T extends Route>(route: T, touches: Route[] = []) {
  const client = useQueryClient();
  return useMutation<ResponseOf<T>, ApiProblem, Order<T>>({
    mutationFn: ({ params, query, body }) => send<ResponseOf<T>>(route.method, pathTo(route, params, query), { body }),
    onSuccess: () => Promise.all(touches.map((touched) => client.invalidateQueries({ queryKey: routeKey(touched) }))),
  });
}
