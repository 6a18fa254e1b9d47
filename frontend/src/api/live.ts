/** Server-sent events: what changed is asked for again, so that a page left open stays true. */
import { changeEvent } from '@strainwright/common/contract/wire';
import { EventSource } from 'eventsource';
import { useEffect } from 'react';
import { getAccessToken } from './client';
import { queryClient } from './queries';

const LISTS = /^\/api\/(worklist|orders|specimens|certificates|determinations)(\?|$)/;

export function useLiveUpdates(signedIn: boolean): void {
  useEffect(() => {
    if (!signedIn) return undefined;
    const source = new EventSource('/api/events', {
      fetch: (input, init) => fetch(input, { ...init, headers: { ...init.headers, authorization: `Bearer ${getAccessToken() ?? ''}` } }),
    });
    source.addEventListener('change', (event) => {
      const change = changeEvent.safeParse(JSON.parse(event.data as string));
      if (!change.success) return;
      const { id, orderId } = change.data;
      void queryClient.invalidateQueries({
        predicate: ({ queryKey }) => {
          const path = String(queryKey[0]);
          return path.includes(id) || (orderId !== null && path.includes(orderId)) || LISTS.test(path) || path.includes('/runs/') || path.includes('/specimens/');
        },
      });
    });
    return () => source.close();
  }, [signedIn]);
}
