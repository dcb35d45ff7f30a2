import { queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import * as contract from '@shared/features/events/events.contract';
import type {
  BlockInput,
  DeadlineInput,
  EventDetail,
  EventInput,
  EventState,
  RoomInput,
} from '@shared/features/events/events.contract';
import { call } from '@/lib/api';

export const myEventsQuery = queryOptions({
  queryKey: ['events', 'mine'],
  queryFn: ({ signal }) => call(contract.listMyEvents, { signal }),
});

export const eventQuery = (event: string) =>
  queryOptions({
    queryKey: ['events', 'one', event],
    queryFn: ({ signal }) => call(contract.readEvent, { params: { event }, signal }),
  });

export const teamQuery = (event: string) =>
  queryOptions({
    queryKey: ['events', 'team', event],
    queryFn: ({ signal }) => call(contract.listTeam, { params: { event }, signal }),
  });

/** Puts the answer in place and lets everything that depends on the event be read anew. */
function useEventMutation<V>(event: string, mutationFn: (variables: V) => Promise<EventDetail>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn,
    onSuccess: (detail) => {
      client.setQueryData(eventQuery(event).queryKey, detail);
      for (const key of ['events', 'runup', 'programme', 'site'])
        void client.invalidateQueries({ queryKey: [key] });
    },
  });
}

type Versioned<T> = { version: number } & T;

export function useCreateEvent() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: EventInput) => call(contract.createEvent, { body }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['events', 'mine'] }),
  });
}
export const useUpdateEvent = (event: string) =>
  useEventMutation(event, ({ version, body }: Versioned<{ body: EventInput }>) =>
    call(contract.updateEvent, { params: { event }, version, body }),
  );
export const useChangeEventState = (event: string) =>
  useEventMutation(event, ({ version, to }: Versioned<{ to: EventState }>) =>
    call(contract.changeEventState, { params: { event }, version, body: { to } }),
  );
export const useReplaceRooms = (event: string) =>
  useEventMutation(event, ({ version, rooms }: Versioned<{ rooms: RoomInput[] }>) =>
    call(contract.replaceRooms, { params: { event }, version, body: { rooms } }),
  );
export const useReplaceDayFrames = (event: string) =>
  useEventMutation(event, ({ version, blocks }: Versioned<{ blocks: BlockInput[] }>) =>
    call(contract.replaceDayFrames, { params: { event }, version, body: { blocks } }),
  );
export const useReplaceDeadlines = (event: string) =>
  useEventMutation(event, ({ version, deadlines }: Versioned<{ deadlines: DeadlineInput[] }>) =>
    call(contract.replaceDeadlines, { params: { event }, version, body: { deadlines } }),
  );

export function useEndTeamRole(event: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (params: { account: string; grant: string }) =>
      call(contract.endTeamRole, { params: { event, ...params } }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['events', 'team', event] }),
  });
}
