import { queryOptions } from '@tanstack/react-query';
import * as contract from '@shared/features/site/site.contract';
import { call } from '@/lib/api';

export const publicEventsQuery = queryOptions({
  queryKey: ['site', 'events'],
  queryFn: ({ signal }) => call(contract.listPublicEvents, { signal }),
});

export const publicEventQuery = (event: string) =>
  queryOptions({
    queryKey: ['site', 'event', event],
    queryFn: ({ signal }) => call(contract.readPublicEvent, { params: { event }, signal }),
  });

export const publicTalkQuery = (event: string, talk: string) =>
  queryOptions({
    queryKey: ['site', 'talk', event, talk],
    queryFn: ({ signal }) => call(contract.readPublicTalk, { params: { event, talk }, signal }),
  });

export const publicPeopleQuery = (event: string) =>
  queryOptions({
    queryKey: ['site', 'people', event],
    queryFn: ({ signal }) => call(contract.listPublicPeople, { params: { event }, signal }),
  });
