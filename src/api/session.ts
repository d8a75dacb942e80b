import { queryOptions, useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { Health, Session, type SignIn } from '../../shared/session.ts';
import { ApiProblem, command, request } from './http.ts';

export const sessionKey = ['session'] as const;

/** The server leaves this readable cookie beside the session's own, which no script can see. */
const mayBeSignedIn = () => document.cookie.split('; ').includes('perhertz_signed_in=1');

/** Who is signed in; null where nobody is. Asks only where somebody may be. */
export const sessionOptions = queryOptions({
  queryKey: sessionKey,
  queryFn: async ({ signal }): Promise<Session | null> => {
    if (!mayBeSignedIn()) return null;
    try {
      return await request(Session, '/api/session', { signal, recover: false });
    } catch (error) {
      if (error instanceof ApiProblem && error.status === 401) return null;
      throw error;
    }
  },
  staleTime: 5 * 60_000,
});

export const useSession = () => useQuery(sessionOptions);

/** Signs in. Throws ApiProblem 401 (wrong), 429 (pause) with a sentence. */
export const signIn = (body: SignIn): Promise<Session> =>
  request(Session, '/api/session', { method: 'POST', body, recover: false });

export function useSignIn() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: signIn,
    onSuccess: (session) => client.setQueryData(sessionKey, session),
  });
}

export function useSignOut() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => command('/api/session', { method: 'DELETE', recover: false }),
    onSuccess: () => {
      client.clear();
      client.setQueryData(sessionKey, null);
    },
  });
}

/** Whether database and worker are alive; asked every 20 s while the page is seen. */
export const healthOptions = queryOptions({
  queryKey: ['health'],
  queryFn: ({ signal }) => request(Health, '/api/health', { signal, recover: false }),
  refetchInterval: 20_000,
  staleTime: 10_000,
  retry: false,
});

export const useHealth = () => useQuery(healthOptions);
