import { QueryClient } from '@tanstack/vue-query';
import { isProblem } from '@/api/problem-error.ts';

const RETRIES = 2;

/** Only what may pass by itself is tried again: a lost connection or a server that is not ready. */
function mayPass(error: unknown): boolean {
  return isProblem(error, 'offline') || (isProblem(error) && error.status >= 502 && error.status <= 504);
}

export function createQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        // Answers are replaced, never changed: watching each value in thousands of marks would cost more than drawing them.
        shallow: true,
        staleTime: 10_000,
        retry: (failures, error) => failures < RETRIES && mayPass(error),
        refetchOnWindowFocus: true,
      },
      mutations: { retry: false },
    },
  });
}
