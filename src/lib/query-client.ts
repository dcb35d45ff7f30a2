import { QueryClient } from '@tanstack/react-query';
import { Problem } from '@shared/http/problem';

/** Answers stay fresh for half a minute; refusals are not asked again, a lost network is, twice. */
export const queryClient = new QueryClient({
  defaultOptions: {
    queries: {
      staleTime: 30_000,
      retry: (failures, error) =>
        failures < 2 && (!(error instanceof Problem) || error.status === 0 || error.status >= 500),
      refetchOnWindowFocus: true,
    },
  },
});
