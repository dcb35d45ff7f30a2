import { queryOptions } from '@tanstack/react-query';
import { readOverview } from '@shared/features/runup/runup.contract';
import { call } from '@/lib/api';

export const overviewQuery = (event: string) =>
  queryOptions({
    queryKey: ['runup', 'overview', event],
    queryFn: ({ signal }) => call(readOverview, { params: { event }, signal }),
    refetchInterval: 60_000,
  });
