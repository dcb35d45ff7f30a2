import { defineFact } from '@server/jobs/job';

/** A revision became public. */
export const revisionPublished = defineFact<{ eventId: string; number: number }>('revisionPublished');
