import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import * as contract from '@shared/features/finance/finance.contract';
import type { BodyOf } from '@shared/http/endpoint';
import { call } from '@/lib/api';

export const feesQuery = (event: string) =>
  queryOptions({
    queryKey: ['finance', 'fees', event],
    queryFn: ({ signal }) => call(contract.readFeeTable, { params: { event }, signal }),
  });

export function useReplaceFees(event: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof contract.replaceFeeTable>) =>
      call(contract.replaceFeeTable, { params: { event }, body }),
    onSuccess: (table) => {
      client.setQueryData(feesQuery(event).queryKey, table);
      for (const key of ['registration', 'events', 'runup', 'site'])
        void client.invalidateQueries({ queryKey: [key] });
    },
  });
}
