import { QueryClient } from '@tanstack/react-query';

let shared: QueryClient | undefined;

/** One cache for all islands of a page in the browser; a new one for each render on the server. */
export function queryClient(): QueryClient {
  if (import.meta.env.SSR) return new QueryClient();
  shared ??= new QueryClient({ defaultOptions: { queries: { retry: 1, refetchOnWindowFocus: false } } });
  return shared;
}
