/** TanStack Query over the API: a path is the key, the contract's schema parses the answer. */
import { QueryClient, useMutation, useQuery, useQueryClient, type UseMutationResult, type UseQueryResult } from '@tanstack/react-query';
import type { z } from 'zod';
import { call, NetworkLost } from './client';

export const queryClient = new QueryClient({
  defaultOptions: {
    queries: { retry: (count, error) => error instanceof NetworkLost && count < 2, staleTime: 5_000, refetchOnWindowFocus: true },
    mutations: { retry: false },
  },
});

interface Options<T> {
  enabled?: boolean;
  /** Asks again while this says so: the row is what counts, an event only hastens it. */
  every?: (data: T | undefined) => number | false;
}

export function useApi<T>(schema: z.ZodType<T>, path: string, options: Options<T> = {}): UseQueryResult<T> {
  return useQuery({
    queryKey: [path], queryFn: () => call(schema, 'GET', path), enabled: options.enabled ?? true,
    refetchInterval: (query) => options.every?.(query.state.data) ?? false,
  });
}

/** An act that changes something; afterwards everything on screen is asked for again. */
export function useAct<T, V = void>(act: (variables: V) => Promise<T>, onDone?: (result: T, variables: V) => void): UseMutationResult<T, Error, V> {
  const client = useQueryClient();
  return useMutation({
    mutationFn: act,
    onSuccess: async (result, variables) => {
      onDone?.(result, variables);
      await client.invalidateQueries();
    },
  });
}
