import { useQuery } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { useParams } from 'react-router-dom';
import { costKinds } from '@shared/features/grants/grants.contract';
import type { FunderAward, FunderView } from '@shared/features/grants/grants-funder.contract';
import { costKindNames, formatGrant } from '@shared/features/grants/grants.rules';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { EmptyState, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { FunderLetter } from './funder-letter';
import { FunderRow } from './funder-row';
import { fundQuery, useApproveAwards } from './grants.queries';

/** The funder's page: the letter left, the awards right. */
export function Component() {
  const { fund = '' } = useParams();
  const query = useQuery(fundQuery(fund));
  return (
    <QueryView query={query} what="the awards">
      {(view) => (
        <div className="grid min-h-[calc(100dvh-46px)] lg:grid-cols-[380px_minmax(0,1fr)]">
          <FunderLetter fund={view} />
          <Awards fund={view} />
        </div>
      )}
    </QueryView>
  );
}

function Awards({ fund }: { fund: FunderView }) {
  const inState = (...states: string[]) => fund.awards.filter((award) => states.includes(award.state)).length;
  const open = fund.awards.filter((award) => award.state === 'proposed');
  const decided = inState('approved', 'offered', 'accepted');
  const kinds = costKinds.filter((kind) =>
    fund.awards.some((award) => award.requested.some((line) => line.kind === kind)),
  );
  const columns = 6 + kinds.length + (fund.showScores ? 1 : 0);
  const total = fund.awards
    .filter((award) => award.state !== 'returned')
    .reduce((sum, award) => sum + award.awardMinor, 0);
  if (fund.awards.length === 0)
    return (
      <div className="px-8 py-6 max-sm:px-4">
        <EmptyState
          title="No awards are proposed to this fund yet."
          fact="When the committee proposes some, you get a letter."
        />
      </div>
    );
  return (
    <section aria-label="Awards" className="min-w-0 px-8 py-6 max-sm:px-4">
      <div className="mb-3 flex flex-wrap items-center gap-x-4 gap-y-2">
        <h2 className="font-serif text-title">{count(fund.awards.length, 'award')}</h2>
        <p className="text-ink2">
          {decided} approved, {inState('queried')} in question, {open.length} to decide
        </p>
        <div className="ml-auto">
          <ApproveRemaining fund={fund} open={open} />
        </div>
      </div>
      <div className="overflow-x-auto" tabIndex={-1}>
        <table className="ruled row-heads whitespace-nowrap [&_tbody_:is(td,th)]:align-middle">
          <caption className="sr-only">
            Awards proposed to {fund.name}, sums in {fund.currency}
          </caption>
          <thead>
            <tr>
              <th scope="col">Reference</th>
              <th scope="col">Stage</th>
              <th scope="col">Coming from</th>
              {fund.showScores && (
                <th scope="col" className="num">
                  Score
                </th>
              )}
              {kinds.map((kind) => (
                <th key={kind} scope="col" className="num">
                  {costKindNames[kind]}
                </th>
              ))}
              <th scope="col" className="num">
                Request
              </th>
              <th scope="col" className="num">
                Award, {fund.currency}
              </th>
              <th scope="col" className="!pl-6">
                Your decision
              </th>
            </tr>
          </thead>
          <tbody>
            {fund.awards.map((award) => (
              <FunderRow key={award.id} award={award} fund={fund} kinds={kinds} columns={columns} />
            ))}
          </tbody>
          <tfoot>
            <tr>
              <th scope="row" colSpan={columns - 2} className="border-t border-ink">
                Together
              </th>
              <td className="num border-t border-ink font-semibold">
                {formatGrant(total, fund.currency, false)}
              </td>
              <td className="border-t border-ink" />
            </tr>
          </tfoot>
        </table>
      </div>
    </section>
  );
}

/** All that is still to decide, in one step that names its number and sum. */
function ApproveRemaining({ fund, open }: { fund: FunderView; open: FunderAward[] }) {
  const [asked, setAsked] = useState(false);
  const approve = useApproveAwards(fund.id);
  const safe = useRef<HTMLButtonElement>(null);
  if (open.length === 0) return null;
  const sum = formatGrant(
    open.reduce((total, award) => total + award.awardMinor, 0),
    fund.currency,
  );
  const go = () =>
    approve.mutate(open, {
      onSuccess: () => {
        toast(`${count(open.length, 'award')} approved.`);
        setAsked(false);
      },
      onError: (error) => {
        sayFailure(error);
        setAsked(false);
      },
    });
  return (
    <>
      <Button variant="primary" onClick={() => setAsked(true)}>
        Approve the remaining {open.length}…
      </Button>
      <Dialog
        open={asked}
        onClose={() => setAsked(false)}
        title={`Approve ${count(open.length, 'award')}`}
        focusFirst={safe}
      >
        <p>
          Together {sum}: {open.map((award) => award.reference).join(', ')}. Each can be undone until the
          letters go out. Queried awards stay in question.
        </p>
        <div className="mt-4 flex gap-2">
          <Button variant="primary" busy={approve.isPending} onClick={go}>
            Approve {count(open.length, 'award')}
          </Button>
          <Button ref={safe} onClick={() => setAsked(false)}>
            Leave them open
          </Button>
        </div>
      </Dialog>
    </>
  );
}
