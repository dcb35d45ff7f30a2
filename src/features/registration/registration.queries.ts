import { infiniteQueryOptions, queryOptions, useMutation, useQueryClient } from '@tanstack/react-query';
import * as contract from '@shared/features/registration/registration.contract';
import type {
  ApplicationState,
  RegistrationInput,
  RegistrationState,
} from '@shared/features/registration/registration.contract';
import type { BodyOf } from '@shared/http/endpoint';
import { call } from '@/lib/api';

export const doorQuery = (event: string) =>
  queryOptions({
    queryKey: ['registration', 'door', event],
    queryFn: ({ signal }) => call(contract.readDoor, { params: { event }, signal }),
  });
export const myRegistrationsQuery = queryOptions({
  queryKey: ['registration', 'mine'],
  queryFn: ({ signal }) => call(contract.listMyRegistrations, { signal }),
});

export const quoteQuery = (event: string, choice: BodyOf<typeof contract.quote>) =>
  queryOptions({
    queryKey: ['registration', 'quote', event, choice],
    queryFn: ({ signal }) => call(contract.quote, { params: { event }, body: choice, signal }),
    enabled: choice.categoryId !== '',
    placeholderData: (before) => before,
    staleTime: 10_000,
  });

/** After any change of one's own registration the door is read anew. */
function useOwn<V, R>(event: string, mutationFn: (variables: V) => Promise<R>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn,
    onSettled: () => client.invalidateQueries({ queryKey: ['registration'] }),
    scope: { id: `registration-${event}` },
  });
}
export const useRegister = (event: string) =>
  useOwn(event, (body: RegistrationInput) => call(contract.register, { params: { event }, body }));
export const useApply = (event: string) =>
  useOwn(event, (body: BodyOf<typeof contract.applyForPlace>) =>
    call(contract.applyForPlace, { params: { event }, body }),
  );
export const usePay = (event: string) =>
  useOwn(event, () => call(contract.pay, { params: { event }, body: {} }));
export const useRefresh = (event: string) =>
  useOwn(event, () => call(contract.refreshPayment, { params: { event }, body: {} }));
export const useCancel = (event: string) =>
  useOwn(event, (version: number) =>
    call(contract.cancelRegistration, { params: { event }, version, body: {} }),
  );
export const useChange = (event: string) =>
  useOwn(event, ({ version, body }: { version: number; body: BodyOf<typeof contract.changeRegistration> }) =>
    call(contract.changeRegistration, { params: { event }, version, body }),
  );
export const useWithdraw = (event: string) =>
  useOwn(event, (version: number) =>
    call(contract.withdrawApplication, { params: { event }, version, body: {} }),
  );

export interface RegistrationFilter {
  state?: RegistrationState;
  q?: string;
  unpaid?: 'true';
}
export const registrationsQuery = (event: string, filter: RegistrationFilter) =>
  infiniteQueryOptions({
    queryKey: ['registration', 'list', event, filter],
    queryFn: ({ pageParam, signal }) =>
      call(contract.listRegistrations, {
        params: { event },
        query: { ...filter, cursor: pageParam ?? undefined, limit: 100 },
        signal,
      }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
  });
export const registrationQuery = (event: string, registration: string) =>
  queryOptions({
    queryKey: ['registration', 'one', event, registration],
    queryFn: ({ signal }) => call(contract.readRegistration, { params: { event, registration }, signal }),
  });
export const placesQuery = (event: string) =>
  queryOptions({
    queryKey: ['registration', 'places', event],
    queryFn: ({ signal }) => call(contract.readPlaces, { params: { event }, signal }),
  });
export const applicationsQuery = (event: string, state?: ApplicationState) =>
  infiniteQueryOptions({
    queryKey: ['registration', 'applications', event, state],
    queryFn: ({ pageParam, signal }) =>
      call(contract.listApplications, {
        params: { event },
        query: { state, cursor: pageParam ?? undefined, limit: 100 },
        signal,
      }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
  });
export const useDecide = (event: string) =>
  useOwn(
    event,
    ({
      application,
      version,
      ...body
    }: { application: string; version: number } & BodyOf<typeof contract.decideApplication>) =>
      call(contract.decideApplication, { params: { event, application }, version, body }),
  );

export const deskQuery = (event: string, q: string) =>
  queryOptions({
    queryKey: ['registration', 'desk', event, q],
    queryFn: ({ signal }) => call(contract.searchDesk, { params: { event }, query: { q }, signal }),
    placeholderData: (before) => before,
    refetchInterval: 15_000,
  });
export const useCheckIn = (event: string) =>
  useOwn(event, ({ registration, present }: { registration: string; present: boolean }) =>
    call(contract.checkIn, { params: { event, registration }, body: { present } }),
  );
