import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import * as letters from '@shared/features/messages/letters.contract';
import type { FreeLetter } from '@shared/features/messages/letters.contract';
import * as contract from '@shared/features/messages/messages.contract';
import type { MessageState } from '@shared/features/messages/messages.contract';
import type { Answer } from '@shared/features/messages/invitations.rules';
import { call } from '@/lib/api';

export interface MessageFilter {
  state?: MessageState;
  q?: string;
  account?: string;
}

/** Messages of an event; of all events for null (administrators). */
export const messagesQuery = (event: string | null, filter: MessageFilter) =>
  infiniteQueryOptions({
    queryKey: ['messages', 'list', event, filter],
    initialPageParam: undefined as string | undefined,
    queryFn: ({ pageParam, signal }) => {
      const query = { ...filter, cursor: pageParam, limit: 50 };
      return event === null
        ? call(contract.listAllMessages, { query, signal })
        : call(contract.listEventMessages, { params: { event }, query, signal });
    },
    getNextPageParam: (page) => page.next ?? undefined,
    // Letters go out while one looks.
    refetchInterval: 10_000,
  });

export const messageQuery = (event: string | null, message: string) =>
  queryOptions({
    queryKey: ['messages', 'one', event, message],
    queryFn: ({ signal }) =>
      event === null
        ? call(contract.readAnyMessage, { params: { message }, signal })
        : call(contract.readEventMessage, { params: { event, message }, signal }),
  });

export function useRetryMessage(event: string | null) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (message: string) =>
      event === null
        ? call(contract.retryMessage, { params: { message } })
        : call(contract.retryEventMessage, { params: { event, message } }),
    onSettled: () => client.invalidateQueries({ queryKey: ['messages'] }),
  });
}

/** What became of the calendar invitations of an event; also shown beside a talk. */
export const talkAnswersQuery = (event: string) =>
  queryOptions({
    queryKey: ['messages', 'answers', event],
    queryFn: ({ signal }) => call(contract.talkAnswers, { params: { event }, signal }),
  });

export const letterGroupsQuery = (event: string) =>
  queryOptions({
    queryKey: ['messages', 'groups', event],
    queryFn: ({ signal }) => call(letters.listLetterGroups, { params: { event }, signal }),
  });

export const usePreviewLetter = (event: string) =>
  useMutation({ mutationFn: (body: FreeLetter) => call(letters.previewLetter, { params: { event }, body }) });
export const useTestLetter = (event: string) =>
  useMutation({ mutationFn: (body: FreeLetter) => call(letters.testLetter, { params: { event }, body }) });
export function useSendLetter(event: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: FreeLetter) => call(letters.sendLetter, { params: { event }, body }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['messages'] }),
  });
}

export const testMailsQuery = (q: string) =>
  queryOptions({
    queryKey: ['messages', 'test-mail', q],
    queryFn: ({ signal }) => call(contract.listTestMail, { query: q ? { q } : {}, signal }),
    refetchInterval: 5_000,
  });
export const testMailQuery = (mail: string) =>
  queryOptions({
    queryKey: ['messages', 'test-mail', 'one', mail],
    queryFn: ({ signal }) => call(contract.readTestMail, { params: { mail }, signal }),
    staleTime: Infinity,
  });

export const calendarAnswerQuery = (token: string) =>
  queryOptions({
    queryKey: ['messages', 'answer', token],
    queryFn: ({ signal }) => call(contract.readInvitationAnswer, { params: { token }, signal }),
    retry: false,
  });
export function useAnswerInvitation(token: string) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (answer: Answer) => call(contract.answerInvitation, { params: { token }, body: { answer } }),
    onSuccess: (view) => client.setQueryData(calendarAnswerQuery(token).queryKey, view),
  });
}

export const myFeedQuery = queryOptions({
  queryKey: ['messages', 'my-feed'],
  queryFn: () => call(contract.readMyFeed, { body: { renew: false } }),
});
export function useRenewFeed() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: () => call(contract.readMyFeed, { body: { renew: true } }),
    onSuccess: (feed) => client.setQueryData(myFeedQuery.queryKey, feed),
  });
}
