import { conflict, forbidden, invalid, notFound } from '@shared/http/problem';
import { newId } from '@server/db/id';
import { transaction } from '@server/db/transaction';
import type { Actor } from '@server/http/authorize';
import { recordAudit } from '@server/features/accounts/accounts.service';
import { submittedCase, viewerOf } from './grants-cases.service';
import { GrantReviewRow } from './grants.model';
import { canScore, conflictOf } from './grants.policy';

/**
 * Gives one's own score, or declares a conflict of interest (taken back by scoring).
 * @throws 403 for one's own application or institution; 409 after the decision; 422 without a score.
 */
export async function scoreApplication(
  actor: Actor,
  eventId: string,
  applicationId: string,
  input: { score: number | null; comment: string; conflict: boolean },
): Promise<{ saved: true; conflict: boolean }> {
  const viewer = await viewerOf(actor);
  await transaction(async () => {
    const { row, reviews } = await submittedCase(eventId, applicationId);
    const mine = reviews.find((review) => review.reviewerId === actor.accountId);
    const found = conflictOf(viewer, row, mine?.conflict ?? false);
    if (found === 'institution')
      throw forbidden('This applicant is from your own institution. The others of the committee score it.');
    if (found === 'own') throw notFound('This grant application');
    if (!canScore(viewer, row, found)) throw forbidden();
    if (row.decision)
      throw conflict('grants.decided', 'The decision has been sent. Scores stay as they are.');
    if (!input.conflict && input.score === null)
      throw invalid({ score: 'Give a score from 1 to 10, or declare a conflict of interest.' });
    const fields = {
      score: input.conflict ? null : input.score,
      comment: input.conflict ? '' : input.comment,
      conflict: input.conflict,
    };
    if (mine) await (await GrantReviewRow.findByPk(mine.id))?.update(fields);
    else await GrantReviewRow.create({ id: newId(), applicationId, reviewerId: actor.accountId, ...fields });
    await recordAudit({
      actor,
      action: input.conflict ? 'grants.conflict_declared' : 'grants.scored',
      subject: 'grant application',
      subjectId: applicationId,
      eventId,
      before: mine && { score: mine.score, conflict: mine.conflict },
      after: { score: fields.score, conflict: fields.conflict },
    });
  });
  return { saved: true, conflict: input.conflict };
}
