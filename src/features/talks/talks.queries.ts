import {
  infiniteQueryOptions,
  queryOptions,
  useMutation,
  useQueryClient,
  type QueryClient,
} from '@tanstack/react-query';
import * as contract from '@shared/features/talks/talks.contract';
import * as courses from '@shared/features/talks/talks-courses.contract';
import * as invitation from '@shared/features/talks/talks-invitation.contract';
import * as materials from '@shared/features/talks/talks-materials.contract';
import * as stay from '@shared/features/talks/talks-stay.contract';
import type { Talk } from '@shared/features/talks/talks.contract';
import type { AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import type { PresenceInput } from '@shared/features/talks/talks-stay.contract';
import type { BodyOf, QueryOf } from '@shared/http/endpoint';
import { useEnterSession } from '@/features/accounts/accounts.queries';
import { call } from '@/lib/api';

export type TalkFilter = Pick<
  Partial<QueryOf<typeof contract.listTalks>>,
  'state' | 'kind' | 'q' | 'missing'
>;

export const talksQuery = (event: string, filter: TalkFilter = {}) =>
  infiniteQueryOptions({
    queryKey: ['talks', 'list', event, filter],
    queryFn: ({ pageParam, signal }) =>
      call(contract.listTalks, {
        params: { event },
        query: { ...filter, limit: 100, cursor: pageParam ?? undefined },
        signal,
      }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
  });

export const talkQuery = (event: string, talk: string) =>
  queryOptions({
    queryKey: ['talks', 'one', event, talk],
    queryFn: ({ signal }) => call(contract.readTalk, { params: { event, talk }, signal }),
  });
export const stageQuery = (event: string) =>
  queryOptions({
    queryKey: ['talks', 'stage', event],
    queryFn: ({ signal }) => call(stay.readStage, { params: { event }, signal }),
  });
export const presenceQuery = (event: string) =>
  queryOptions({
    queryKey: ['talks', 'presence', event],
    queryFn: ({ signal }) => call(stay.readMyPresence, { params: { event }, signal }),
  });
export const callQuery = (event: string) =>
  queryOptions({
    queryKey: ['talks', 'call', event],
    queryFn: ({ signal }) => call(contract.readCall, { params: { event }, signal }),
  });
export const coursesQuery = (event: string) =>
  queryOptions({
    queryKey: ['talks', 'courses', event],
    queryFn: ({ signal }) => call(courses.listCourses, { params: { event }, signal }),
  });
/** Newest versions that the reader may download, of all accepted talks of an event. */
export const materialsQuery = (event: string) =>
  queryOptions({
    queryKey: ['talks', 'materials', event],
    queryFn: ({ signal }) => call(materials.listMaterials, { params: { event }, signal }),
  });
export const myTalksQuery = queryOptions({
  queryKey: ['talks', 'mine'],
  queryFn: ({ signal }) => call(contract.listMyTalks, { signal }),
});
export const speakerInvitationQuery = (token: string) =>
  queryOptions({
    queryKey: ['talks', 'invitation', token],
    queryFn: () => call(invitation.readSpeakerInvitation, { params: { token } }),
    retry: false,
    staleTime: Infinity, // the link is spent by the answer; asking again would only say so
  });

/** Puts a talk that came back in place and lets lists that show it be read anew. */
function keepTalk(client: QueryClient, talk: Talk): void {
  client.setQueryData(talkQuery(talk.eventSlug, talk.id).queryKey, talk);
  for (const key of [['talks', 'list'], ['talks', 'mine'], ['programme'], ['runup'], ['site']])
    void client.invalidateQueries({ queryKey: key });
}

function useTalkMutation<V>(mutationFn: (variables: V) => Promise<Talk>) {
  const client = useQueryClient();
  return useMutation({ mutationFn, onSuccess: (talk) => keepTalk(client, talk) });
}

const at = (talk: Talk) => ({ params: { event: talk.eventSlug, talk: talk.id }, version: talk.version });

export const useHandIn = () =>
  useTalkMutation((talk: Talk) => call(contract.handInAbstract, { ...at(talk), body: {} }));
export const useDecide = () =>
  useTalkMutation(({ talk, ...body }: { talk: Talk } & BodyOf<typeof contract.decideTalk>) =>
    call(contract.decideTalk, { ...at(talk), body }),
  );
export const useWithdraw = () =>
  useTalkMutation(({ talk, note }: { talk: Talk; note: string }) =>
    call(contract.withdrawTalk, { ...at(talk), body: { note } }),
  );
export const useUpdateTalk = () =>
  useTalkMutation(({ talk, body }: { talk: Talk; body: BodyOf<typeof contract.updateTalk> }) =>
    call(contract.updateTalk, { ...at(talk), body }),
  );
export const useCreateTalk = (event: string) =>
  useTalkMutation((body: BodyOf<typeof contract.createTalk>) =>
    call(contract.createTalk, { params: { event }, body }),
  );
export const useInviteSpeaker = (event: string) =>
  useTalkMutation((body: BodyOf<typeof invitation.inviteSpeaker>) =>
    call(invitation.inviteSpeaker, { params: { event }, body }),
  );
export const useSubmitTalk = (event: string) =>
  useTalkMutation((body: AbstractInput) => call(contract.submitTalk, { params: { event }, body }));
export const useConsent = () =>
  useTalkMutation(({ talk, consent }: { talk: Talk; consent: boolean }) =>
    call(materials.setRecordingConsent, {
      params: { event: talk.eventSlug, talk: talk.id },
      body: { consent },
    }),
  );
export const useMaterialAccess = () =>
  useTalkMutation(
    ({
      talk,
      material,
      version,
      body,
    }: {
      talk: Talk;
      material: string;
      version: number;
      body: BodyOf<typeof materials.setMaterialAccess>;
    }) =>
      call(materials.setMaterialAccess, {
        params: { event: talk.eventSlug, talk: talk.id, material },
        version,
        body,
      }),
  );
export const useRemind = (event: string) =>
  useMutation({ mutationFn: () => call(invitation.remindSpeakers, { params: { event }, body: {} }) });

export interface Upload {
  talk: Talk;
  kind: (typeof contract.materialKinds)[number];
  file: File;
  onProgress: (share: number) => void;
  signal: AbortSignal;
}
export const useUpload = () =>
  useTalkMutation(({ talk, kind, ...rest }: Upload) =>
    call(materials.uploadMaterial, {
      params: { event: talk.eventSlug, talk: talk.id },
      body: { kind },
      ...rest,
    }),
  );

/** For autosave: keeps the answer and hands it back. */
export function useAbstractSaver(event: string, talk: string) {
  const client = useQueryClient();
  return {
    save: async (body: AbstractInput, version: number) => {
      const saved = await call(contract.saveAbstract, { params: { event, talk }, body, version });
      keepTalk(client, saved);
      return saved.version;
    },
    reload: () => client.fetchQuery({ ...talkQuery(event, talk), staleTime: 0 }),
  };
}
export function usePresenceSaver(event: string) {
  const client = useQueryClient();
  return {
    save: async (body: PresenceInput, version: number) => {
      const saved = await call(stay.saveMyPresence, { params: { event }, body, version });
      client.setQueryData(presenceQuery(event).queryKey, saved);
      void client.invalidateQueries({ queryKey: ['programme'] });
      return saved.version;
    },
    reload: () => client.fetchQuery({ ...presenceQuery(event), staleTime: 0 }),
  };
}

export function useAnswerInvitation(token: string) {
  const enter = useEnterSession();
  return useMutation({
    mutationFn: (body: BodyOf<typeof invitation.answerSpeakerInvitation>) =>
      call(invitation.answerSpeakerInvitation, { params: { token }, body }),
    onSuccess: (answer) => answer.answer === 'accepted' && enter(answer.session),
  });
}

function useCourseMutation<V, R>(event: string, mutationFn: (variables: V) => Promise<R>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn,
    onSuccess: () => {
      for (const key of [['talks'], ['programme'], ['site']])
        void client.invalidateQueries({ queryKey: key });
    },
  });
}
export const useCreateCourse = (event: string) =>
  useCourseMutation(event, (body: BodyOf<typeof courses.createCourse>) =>
    call(courses.createCourse, { params: { event }, body }),
  );
export const useUpdateCourse = (event: string) =>
  useCourseMutation(
    event,
    ({
      course,
      version,
      body,
    }: {
      course: string;
      version: number;
      body: BodyOf<typeof courses.updateCourse>;
    }) => call(courses.updateCourse, { params: { event, course }, version, body }),
  );
export const useReplacePrerequisites = (event: string) =>
  useCourseMutation(event, (pairs: { before: string; after: string }[]) =>
    call(courses.replacePrerequisites, { params: { event }, body: { pairs } }),
  );
