import { QueryClient } from '@tanstack/react-query';

let client: QueryClient | null = null;

/** The browser's one query client. Data is fresh until something says that it changed. */
export function queryClient(): QueryClient {
  client ??= new QueryClient({ defaultOptions: { queries: { staleTime: Infinity, retry: 2, refetchOnWindowFocus: true, networkMode: 'always' } } });
  return client;
}
