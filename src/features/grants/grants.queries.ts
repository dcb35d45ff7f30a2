import { queryOptions, useMutation, useQueryClient, type QueryClient } from '@tanstack/react-query';
import * as contract from '@shared/features/grants/grants.contract';
import * as committee from '@shared/features/grants/grants-committee.contract';
import * as funding from '@shared/features/grants/grants-funder.contract';
import type { CostKind, FundInput, GrantInput, MyGrant } from '@shared/features/grants/grants.contract';
import type { FunderAward, FunderView } from '@shared/features/grants/grants-funder.contract';
import type { BodyOf } from '@shared/http/endpoint';
import { call } from '@/lib/api';

export const boardQuery = (event: string) =>
  queryOptions({
    queryKey: ['grants', 'board', event],
    queryFn: ({ signal }) => call(committee.readBoard, { params: { event }, signal }),
  });
export const grantQuery = (event: string, application: string) =>
  queryOptions({
    queryKey: ['grants', 'one', event, application],
    queryFn: ({ signal }) => call(committee.readGrant, { params: { event, application }, signal }),
  });
export const myGrantQuery = (event: string) =>
  queryOptions({
    queryKey: ['grants', 'mine', event],
    queryFn: ({ signal }) => call(contract.readMyGrant, { params: { event }, signal }),
  });
export const fundQuery = (fund: string) =>
  queryOptions({
    queryKey: ['grants', 'fund', fund],
    queryFn: ({ signal }) => call(funding.readFund, { params: { fund }, signal }),
  });

function useMyGrantMutation<V>(event: string, mutationFn: (variables: V) => Promise<MyGrant>) {
  const client = useQueryClient();
  return useMutation({ mutationFn, onSuccess: (mine) => keepMine(client, event, mine) });
}
function keepMine(client: QueryClient, event: string, mine: MyGrant): void {
  client.setQueryData(myGrantQuery(event).queryKey, mine);
  void client.invalidateQueries({ queryKey: ['runup'] });
}
type Versioned<T = object> = { version: number } & T;

export const useSaveMyGrant = (event: string) =>
  useMyGrantMutation(event, ({ version, body }: Versioned<{ body: GrantInput }>) =>
    call(contract.saveMyGrant, { params: { event }, version, body }),
  );
export const useSubmitMyGrant = (event: string) =>
  useMyGrantMutation(event, ({ version }: Versioned) =>
    call(contract.submitMyGrant, { params: { event }, version, body: {} }),
  );
export const useWithdrawMyGrant = (event: string) =>
  useMyGrantMutation(event, ({ version }: Versioned) =>
    call(contract.withdrawMyGrant, { params: { event }, version, body: {} }),
  );
export const useAnswerAward = (event: string) =>
  useMyGrantMutation(event, ({ version, answer }: Versioned<BodyOf<typeof contract.answerAward>>) =>
    call(contract.answerAward, { params: { event }, version, body: { answer } }),
  );
export const useAddEvidence = (event: string) =>
  useMyGrantMutation(
    event,
    ({ kind, file, onProgress }: { kind: CostKind; file: File; onProgress?: (share: number) => void }) =>
      call(contract.addEvidence, { params: { event }, body: { kind }, file, onProgress }),
  );
export const useRemoveEvidence = (event: string) =>
  useMyGrantMutation(event, (evidence: string) =>
    call(contract.removeEvidence, { params: { event, evidence } }),
  );

/** Whatever the committee does can move ranks, sums and reasons: everything of grants is read anew. */
function useCommitteeMutation<V, R>(mutationFn: (variables: V) => Promise<R>) {
  const client = useQueryClient();
  return useMutation({
    mutationFn,
    onSettled: async () => {
      await Promise.all([['grants'], ['runup']].map((queryKey) => client.invalidateQueries({ queryKey })));
    },
  });
}
export const useSaveFund = (event: string) =>
  useCommitteeMutation(
    ({ fund, version, body }: { fund: string | null; version: number; body: FundInput }) =>
      fund
        ? call(contract.updateFund, { params: { event, fund }, version, body })
        : call(contract.createFund, { params: { event }, body }),
  );
export const useScoreGrant = (event: string, application: string) =>
  useCommitteeMutation((body: BodyOf<typeof committee.scoreGrant>) =>
    call(committee.scoreGrant, { params: { event, application }, body }),
  );
export const useProposeAward = (event: string, application: string) =>
  useCommitteeMutation(({ fund, ...body }: { fund: string } & BodyOf<typeof committee.proposeAward>) =>
    call(committee.proposeAward, { params: { event, application, fund }, body }),
  );
export const useAnswerQuery = (event: string) =>
  useCommitteeMutation(({ award, version, text }: Versioned<{ award: string; text: string }>) =>
    call(committee.answerQuery, { params: { event, award }, version, body: { text } }),
  );
export const useSendDecisions = (event: string) =>
  useCommitteeMutation((body: BodyOf<typeof committee.sendDecisions>) =>
    call(committee.sendDecisions, { params: { event }, body }),
  );

/** One decision: the row changes at once, conditions and sums are read anew. */
export function useDecideAward(fund: string) {
  const client = useQueryClient();
  const { queryKey } = fundQuery(fund);
  return useMutation({
    mutationFn: ({ award, ...body }: { award: FunderAward } & BodyOf<typeof funding.decideAward>) =>
      call(funding.decideAward, { params: { fund, award: award.id }, version: award.version, body }),
    onSuccess: (award) =>
      client.setQueryData(
        queryKey,
        (view: FunderView | undefined) =>
          view && { ...view, awards: view.awards.map((row) => (row.id === award.id ? award : row)) },
      ),
    onError: () => client.invalidateQueries({ queryKey }),
  });
}
export function useApproveAwards(fund: string) {
  const client = useQueryClient();
  const { queryKey } = fundQuery(fund);
  return useMutation({
    mutationFn: (awards: readonly FunderAward[]) =>
      call(funding.approveAwards, {
        params: { fund },
        body: { awards: awards.map(({ id, version }) => ({ id, version })) },
      }),
    onSuccess: (view) => client.setQueryData(queryKey, view),
    onError: () => client.invalidateQueries({ queryKey }),
  });
}
