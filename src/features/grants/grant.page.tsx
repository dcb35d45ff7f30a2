import { useQuery } from '@tanstack/react-query';
import { useRef, useState } from 'react';
import { Link, useParams } from 'react-router-dom';
import type { MyGrant } from '@shared/features/grants/grants.contract';
import { formatDateSpan, formatInstant } from '@shared/lib/time';
import { Button, LinkButton } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { ownTime, ownZone } from '@/lib/format';
import { sayFailure } from '@/lib/problem';
import { GrantDecision } from './grant-decision';
import { GrantForm } from './grant-form';
import { GrantSummary } from './grant-summary';
import { myGrantQuery, useWithdrawMyGrant } from './grants.queries';

/** One's own grant application: write, hand in, answer the offer. Complete at 390 px. */
export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(myGrantQuery(event));
  return (
    <div className="mx-auto max-w-[760px] px-6 py-8 text-form max-sm:px-4">
      <QueryView query={query} what="your grant application">
        {(mine) => <Mine mine={mine} />}
      </QueryView>
    </div>
  );
}

function Mine({ mine }: { mine: MyGrant }) {
  const { application, decision } = mine;
  const writes = mine.can.edit && !decision;
  return (
    <>
      <p className="text-ink3">
        <Link to={`/events/${mine.eventSlug}`}>{mine.eventTitle}</Link>,{' '}
        {formatDateSpan(mine.startsOn, mine.endsOn)}
      </p>
      <h1 className="mt-1 mb-3 font-serif text-page max-sm:text-[26px]">
        Travel grant
        {application && <span className="ml-3 text-[18px] text-ink3">{application.reference}</span>}
      </h1>
      {decision ? <GrantDecision mine={mine} decision={decision} /> : <Dates mine={mine} />}
      {writes && <GrantForm key={application?.state ?? 'draft'} mine={mine} />}
      {!writes && application && application.state !== 'withdrawn' && <GrantSummary mine={mine} />}
      {mine.can.withdraw && application?.state === 'submitted' && <Withdraw mine={mine} />}
      {(writes || application?.state === 'submitted') && <DataNote />}
    </>
  );
}

/** The date in the institute's zone, then the reader's own time; or why nothing can be handed in. */
function Dates({ mine }: { mine: MyGrant }) {
  const { application, dueAt, timeZone } = mine;
  if (application?.state === 'submitted')
    return (
      <Note kind="good">
        Handed in on {application.submittedAt && formatInstant(application.submittedAt, timeZone)} ({timeZone}
        ). The committee decides and writes to you. To change something, withdraw the application, change it,
        and hand it in again{dueAt ? ' before the date' : ''}.
      </Note>
    );
  if (mine.closedBecause) {
    return (
      <div className="grid gap-3">
        <Note>{mine.closedBecause}</Note>
        {mine.basis === null && (
          <div>
            <LinkButton to={`/events/${mine.eventSlug}/register`} variant="primary" sizing="form">
              Go to the registration
            </LinkButton>
          </div>
        )}
      </div>
    );
  }
  return (
    <div className="grid gap-3">
      {dueAt && (
        <p>
          Hand in by <b>{formatInstant(dueAt, timeZone)}</b> ({timeZone})
          {ownZone() !== timeZone && <>, which is {ownTime(dueAt)} where you are</>}.
        </p>
      )}
      {mine.coveredKinds.length === 0 && (
        <Note>
          No fund is set up for this event yet. You can hand in; the committee says what is possible.
        </Note>
      )}
      {application?.state === 'withdrawn' && (
        <Note>You withdrew this application. Change it and hand it in again, if you like.</Note>
      )}
    </div>
  );
}

function Withdraw({ mine }: { mine: MyGrant }) {
  const [asked, setAsked] = useState(false);
  const withdraw = useWithdrawMyGrant(mine.eventSlug);
  const safe = useRef<HTMLButtonElement>(null);
  const go = () =>
    withdraw.mutate(
      { version: mine.version },
      {
        onSuccess: () => {
          toast('Your grant application is withdrawn.');
          setAsked(false);
        },
        onError: sayFailure,
      },
    );
  return (
    <div className="mt-6">
      <Button sizing="form" variant="danger" onClick={() => setAsked(true)}>
        Withdraw the application…
      </Button>
      <Dialog
        open={asked}
        onClose={() => setAsked(false)}
        title="Withdraw the grant application"
        focusFirst={safe}
      >
        <p>
          The committee no longer sees it. Your registration is not touched.{' '}
          {mine.closedBecause
            ? 'The date is past: it can’t be handed in again.'
            : 'You can hand it in again before the date.'}
        </p>
        <div className="mt-4 flex gap-2">
          <Button ref={safe} onClick={() => setAsked(false)}>
            Leave it handed in
          </Button>
          <Button variant="danger" busy={withdraw.isPending} onClick={go}>
            Withdraw the application
          </Button>
        </div>
      </Dialog>
    </div>
  );
}

function DataNote() {
  return (
    <section className="mt-8 border-t border-rule pt-4 text-dense text-ink3">
      <h2 className="font-semibold">What happens to your data</h2>
      <p>
        The committee of the event reads your application and documents; nobody of your own institution scores
        it. Funders see a reference, your career stage, the region of your institution and the sums: no name,
        no documents. What is awarded is kept for the accounts as long as the law asks.
      </p>
    </section>
  );
}
