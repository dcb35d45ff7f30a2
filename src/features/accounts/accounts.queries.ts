import {
  infiniteQueryOptions,
  queryOptions,
  useMutation,
  useQuery,
  useQueryClient,
} from '@tanstack/react-query';
import * as contract from '@shared/features/accounts/accounts.contract';
import type { Account, Role, Session } from '@shared/features/accounts/accounts.contract';
import type { BodyOf } from '@shared/http/endpoint';
import { call } from '@/lib/api';

export const sessionQuery = queryOptions({
  queryKey: ['accounts', 'session'],
  queryFn: ({ signal }) => call(contract.readSession, { signal }),
  staleTime: 5 * 60_000,
});

/** The signed-in account, or null; undefined while it is being read. */
export function useAccount(): Account | null | undefined {
  return useQuery(sessionQuery).data?.account;
}

/** Holds the role in that scope; administrators hold every role. For showing links only: doors decide. */
export function holds(account: Account | null | undefined, role: Role, scopeId?: string): boolean {
  return (
    account?.grants.some(
      (grant) =>
        grant.role === 'administrator' ||
        (grant.role === role && (grant.scope === 'institute' || grant.scopeId === scopeId)),
    ) ?? false
  );
}

/** Puts a new session in place and forgets everything that the former person had read. */
export function useEnterSession() {
  const client = useQueryClient();
  return (session: Session) => {
    client.clear();
    client.setQueryData(sessionQuery.queryKey, session);
  };
}

export const useSignIn = () =>
  useMutation({
    mutationFn: (body: BodyOf<typeof contract.signIn>) => call(contract.signIn, { body }),
    onSuccess: useEnterSession(),
  });
export const useSignUp = () =>
  useMutation({ mutationFn: (body: BodyOf<typeof contract.signUp>) => call(contract.signUp, { body }) });
export const useVerify = () =>
  useMutation({
    mutationFn: (token: string) => call(contract.verifyEmail, { body: { token } }),
    onSuccess: useEnterSession(),
  });
export const useAskReset = () =>
  useMutation({ mutationFn: (email: string) => call(contract.askReset, { body: { email } }) });
export const useReset = () =>
  useMutation({
    mutationFn: (body: { token: string; password: string }) => call(contract.resetPassword, { body }),
    onSuccess: useEnterSession(),
  });
export const useChangePassword = () =>
  useMutation({
    mutationFn: (body: { current: string; password: string }) => call(contract.changePassword, { body }),
  });
export const useAcceptInvitation = (token: string) =>
  useMutation({
    mutationFn: (password?: string) =>
      call(contract.acceptInvitation, { params: { token }, body: { password } }),
    onSuccess: useEnterSession(),
  });

export function useSignOut() {
  const client = useQueryClient();
  return useMutation({ mutationFn: () => call(contract.signOut), onSuccess: () => client.clear() });
}

export function useSaveProfile(version: number) {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: BodyOf<typeof contract.saveProfile>) => call(contract.saveProfile, { body, version }),
    onSuccess: (account) =>
      client.setQueryData(sessionQuery.queryKey, (session) => session && { ...session, account }),
  });
}

export const invitationQuery = (token: string) =>
  queryOptions({
    queryKey: ['accounts', 'invitation', token],
    queryFn: () => call(contract.readInvitation, { params: { token } }),
    retry: false,
  });

export const sessionsQuery = queryOptions({
  queryKey: ['accounts', 'sessions'],
  queryFn: () => call(contract.listSessions),
});
export function useEndSession() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (session: string) => call(contract.endSession, { params: { session } }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['accounts', 'sessions'] }),
  });
}

export const demoAccountsQuery = queryOptions({
  queryKey: ['accounts', 'demo'],
  queryFn: () => call(contract.listDemoAccounts),
  staleTime: Infinity,
});

export const accountsQuery = (q: string, role?: Role) =>
  infiniteQueryOptions({
    queryKey: ['accounts', 'list', q, role],
    queryFn: ({ pageParam, signal }) =>
      call(contract.listAccounts, { query: { q, role, cursor: pageParam ?? undefined }, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
  });

export function useGrantRole() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: ({ account, ...body }: { account: string } & BodyOf<typeof contract.grantRole>) =>
      call(contract.grantRole, { params: { account }, body }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['accounts', 'list'] }),
  });
}
export function useEndRole() {
  const client = useQueryClient();
  return useMutation({
    mutationFn: (params: { account: string; grant: string }) => call(contract.endRole, { params }),
    onSuccess: () => client.invalidateQueries({ queryKey: ['accounts', 'list'] }),
  });
}
export const useInvite = () =>
  useMutation({ mutationFn: (body: BodyOf<typeof contract.invite>) => call(contract.invite, { body }) });

export const auditQuery = (q: string) =>
  infiniteQueryOptions({
    queryKey: ['accounts', 'audit', q],
    queryFn: ({ pageParam, signal }) =>
      call(contract.listAudit, { query: { q, cursor: pageParam ?? undefined }, signal }),
    initialPageParam: null as string | null,
    getNextPageParam: (page) => page.next,
  });
