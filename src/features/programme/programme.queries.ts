import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import * as contract from '@shared/features/programme/programme.contract';
import { call } from '@/lib/api';

const params = (event: string) => ({ params: { event } });

export const programmeOf = (event: string) =>
  queryOptions({
    queryKey: ['programme', event, 'public'],
    queryFn: ({ signal }) => call(contract.readProgramme, { ...params(event), signal }),
  });

export const myProgrammeOf = (event: string) =>
  queryOptions({
    queryKey: ['programme', event, 'mine'],
    queryFn: ({ signal }) => call(contract.readMyProgramme, { ...params(event), signal }),
  });

/** Not refetched by itself while it is fresh: the composer keeps it in step with its own changes. */
export const draftOf = (event: string) =>
  queryOptions({
    queryKey: ['programme', event, 'draft'],
    queryFn: ({ signal }) => call(contract.readDraft, { ...params(event), signal }),
    staleTime: 60_000,
  });

/** What the draft would change, read again whenever it is opened. */
export const draftComparisonOf = (event: string, version: number, from?: number) =>
  queryOptions({
    queryKey: ['programme', event, 'comparison', version, from],
    queryFn: ({ signal }) => call(contract.compareDraft, { ...params(event), query: { from }, signal }),
    staleTime: 0,
  });

export const revisionsOf = (event: string) =>
  queryOptions({
    queryKey: ['programme', event, 'revisions'],
    queryFn: ({ signal }) => call(contract.listRevisions, { ...params(event), signal }),
  });

/** What revision `to` changed against revision `from`. */
export const revisionComparisonOf = (event: string, from: number, to: number) =>
  queryOptions({
    queryKey: ['programme', event, 'revisions', from, to],
    queryFn: ({ signal }) =>
      call(contract.compareRevisions, { params: { event, number: to }, query: { from }, signal }),
  });

export function usePublish(event: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (input: { version: number; note: string; withClashes: boolean }) =>
      call(contract.publishProgramme, {
        ...params(event),
        version: input.version,
        body: { note: input.note, withClashes: input.withClashes },
      }),
    onSettled: () => client.invalidateQueries({ queryKey: ['programme', event] }),
  });
}
