import { QueryClient, QueryClientProvider } from '@tanstack/react-query';
import { useState, type ReactNode } from 'react';

const options = { defaultOptions: { queries: { retry: 1, staleTime: 10_000, refetchOnWindowFocus: false } } };
let browserClient: QueryClient | undefined;

/** One client for all islands of a page in the browser; a new one for each render on the server. */
function queryClient(): QueryClient {
  if (typeof window === 'undefined') return new QueryClient(options);
  return (browserClient ??= new QueryClient(options));
}

/** Wraps an island that asks the server. */
export function Queries({ children }: { children: ReactNode }) {
  const [client] = useState(queryClient);
  return <QueryClientProvider client={client}>{children}</QueryClientProvider>;
}
