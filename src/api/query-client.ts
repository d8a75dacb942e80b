import { QueryClient } from '@tanstack/react-query';
import { NetworkFailure } from './http.ts';

/** Queries try again where the network failed; what the server refused stays refused. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        retry: (failures, error) => error instanceof NetworkFailure && failures < 2,
        retryDelay: (attempt) => 400 * 2 ** attempt,
        refetchOnWindowFocus: true,
      },
      mutations: { retry: false },
    },
  });
}
