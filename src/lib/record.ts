import { QueryClient, queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import type { MeView } from '#shared/schemas/access.ts';
import { api, ApiProblem } from './api-client.ts';

export const queryClient = new QueryClient({
  defaultOptions: {
    queries: {
      staleTime: 10_000,
      // Asked without a network too: the page then says so at once and offers to try again.
      networkMode: 'always',
      retry: (count, error) => count < 2 && error instanceof ApiProblem && error.document.status === 503,
    },
  },
});

/** Keys: everything of a site sits under ['site', id], so that a write refreshes what it touched. */
export const recordQuery = <T>(siteId: string, path: string) =>
  queryOptions({
    queryKey: ['site', siteId, path],
    queryFn: ({ signal }) => api.get<T>(`/sites/${siteId}${path}`, signal),
  });

export const meQuery = queryOptions({
  queryKey: ['me'],
  queryFn: ({ signal }) => api.get<MeView>('/me', signal),
  staleTime: 60_000,
});

/** A view of the site's record. */
export const useRecord = <T>(siteId: string, path: string) => useQuery(recordQuery<T>(siteId, path));

/** A write to the site's record; on success everything of the site is read again. */
export function useWrite<Body = unknown, Answer = unknown>(
  siteId: string,
  path: string | ((body: Body) => string),
  options: {
    method?: 'POST' | 'PUT';
    headers?: Record<string, string>;
    onDone?: (answer: Answer) => void;
  } = {},
) {
  const client = useQueryClient();
  return useMutation<Answer, ApiProblem, Body>({
    mutationFn: (body) =>
      api.send<Answer>(
        options.method ?? 'POST',
        `/sites/${siteId}${typeof path === 'function' ? path(body) : path}`,
        body,
        { ...(options.headers ? { headers: options.headers } : {}) },
      ),
    onSuccess: async (answer) => {
      await client.invalidateQueries({ queryKey: ['site', siteId] });
      options.onDone?.(answer);
    },
  });
}
