import { useQuery } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import type { DoorView, RegistrationView } from '@shared/features/registration/registration.contract';
import { dietNames, registrationStateNames } from '@shared/features/registration/registration.rules';
import { formatMoney } from '@shared/lib/money';
import { formatDate, formatDateSpan, formatInstant } from '@shared/lib/time';
import { Button, LinkButton } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { EmptyState, Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { Account } from './account';
import { doorQuery, useCancel, usePay, useRefresh } from './registration.queries';

/** One's own registration: what was taken, what is to be paid, what comes next. */
export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(doorQuery(event));
  return (
    <QueryView query={query} what="your registration">
      {(view) =>
        view.registration ? (
          <Mine view={view} mine={view.registration} />
        ) : (
          <div className="mx-auto max-w-[620px] px-4 py-10">
            <EmptyState
              title="You are not registered for this event."
              fact={view.closedBecause ?? undefined}
              action={
                <LinkButton variant="primary" sizing="form" to={`/events/${event}/register`}>
                  Register
                </LinkButton>
              }
            />
          </div>
        )
      }
    </QueryView>
  );
}

/** After the payment page: asks until the payment has arrived, or says that it has not. */
function useReturn(slug: string, mine: RegistrationView): 'waiting' | 'late' | 'no' {
  const [search] = useSearchParams();
  const came = search.get('paid') === '1' && mine.state === 'reserved';
  const { mutate: ask } = useRefresh(slug);
  const [tries, setTries] = useState(0);
  useEffect(() => {
    if (!came || tries > 12) return;
    const timer = setTimeout(
      () => {
        ask(undefined);
        setTries(tries + 1);
      },
      tries === 0 ? 50 : 1200,
    );
    return () => clearTimeout(timer);
  }, [ask, came, tries]);
  return !came ? 'no' : tries > 12 ? 'late' : 'waiting';
}

function Mine({ view, mine }: { view: DoorView; mine: RegistrationView }) {
  const pay = usePay(view.eventSlug);
  const waiting = useReturn(view.eventSlug, mine);
  const { order } = mine;
  const open = mine.state === 'reserved' && order?.state === 'placed';
  const heading = open
    ? waiting === 'waiting'
      ? 'Looking for your payment …'
      : 'Your place is kept'
    : mine.state === 'registered' || mine.state === 'attended'
      ? order && order.price.totalMinor > 0
        ? 'You are registered and paid.'
        : 'You are registered.'
      : registrationStateNames[mine.state];
  return (
    <div className="grid min-h-[calc(100dvh-46px)] lg:grid-cols-[1fr_460px]">
      <div className="px-[clamp(16px,8vw,120px)] py-12 text-form">
        <p className="text-ui text-ink3">
          Registration {mine.code}
          {order ? ` · order ${order.number}` : ''}
        </p>
        <h1 className="font-serif text-[34px] leading-[42px]" aria-live="polite">
          {heading}
        </h1>
        <p className="mt-1 font-serif text-[18px] text-ink2">
          {view.eventTitle}, {view.town}, {formatDateSpan(view.startsOn, view.endsOn)}.
        </p>
        {waiting === 'late' && (
          <div className="mt-5">
            <Note>
              The payment has not arrived yet. If you have paid, it will appear here by itself; you need not
              pay twice.
            </Note>
          </div>
        )}
        {open && waiting !== 'waiting' && order && (
          <div className="mt-6 grid gap-3">
            {order.lastFailure && (
              <Note kind="must">
                The card was not charged: {order.lastFailure} Nothing is lost; try another card.
              </Note>
            )}
            <p>
              <b className="font-semibold">{formatMoney(order.price.totalMinor, order.price.currency)}</b> to
              pay
              {order.reservedUntil && (
                <>
                  {' '}
                  by {formatInstant(order.reservedUntil, view.timeZone)} ({view.timeZone}); after that the
                  place goes back
                </>
              )}
              .
            </p>
            <div>
              <Button
                variant="primary"
                sizing="form"
                busy={pay.isPending}
                onClick={() =>
                  pay.mutate(undefined, {
                    onSuccess: ({ url }) => window.location.assign(url),
                    onError: sayFailure,
                  })
                }
              >
                Pay by card
              </Button>
            </div>
          </div>
        )}
        <table className="ruled mt-7 text-form">
          <tbody>
            {order?.state === 'paid' && (
              <Row
                label="Paid"
                value={
                  <>
                    <b className="font-semibold">
                      {formatMoney(order.price.totalMinor, order.price.currency)}
                    </b>
                    {order.paidAt ? ` on ${formatInstant(order.paidAt, view.timeZone)}` : ''}
                  </>
                }
              />
            )}
            <Row
              label="Stay"
              value={
                mine.arrivesOn || mine.leavesOn
                  ? `${mine.arrivesOn ? formatDate(mine.arrivesOn) : 'not said'} to ${mine.leavesOn ? formatDate(mine.leavesOn) : 'not said'}`
                  : 'not said yet'
              }
            />
            <Row
              label="Food"
              value={`${dietNames[mine.diet]}${mine.allergies ? `; allergies: ${mine.allergies}` : ''}`}
            />
            <Row label="Badge" value={mine.badgeName} />
            <Row
              label="At the desk"
              value={
                <>
                  Say your name or the code <b className="font-mono">{mine.code}</b>
                </>
              }
            />
          </tbody>
        </table>
        <div className="mt-8 flex flex-wrap gap-x-6 gap-y-2">
          <Link to={`/events/${view.eventSlug}/grant`}>Ask for a travel grant</Link>
          <Link to={`/events/${view.eventSlug}/submit`}>Offer a talk</Link>
          <Link to={`/events/${view.eventSlug}/programme`}>Programme</Link>
          {['reserved', 'registered'].includes(mine.state) && <CancelButton view={view} mine={mine} />}
        </div>
      </div>
      <aside className="border-l border-rule bg-paper px-12 py-12 max-lg:px-4">
        {order && (
          <Account
            price={order.price}
            title={order.state === 'paid' ? 'Paid' : 'Your fee'}
            total={order.state === 'paid' ? 'Together' : 'To pay'}
          />
        )}
      </aside>
    </div>
  );
}

const Row = ({ label, value }: { label: string; value: React.ReactNode }) => (
  <tr>
    <th scope="row" className="w-32 border-b border-rule! font-normal! text-ink3!">
      {label}
    </th>
    <td>{value}</td>
  </tr>
);

function CancelButton({ view, mine }: { view: DoorView; mine: RegistrationView }) {
  const [asked, setAsked] = useState(false);
  const cancel = useCancel(view.eventSlug);
  const keep = useRef<HTMLButtonElement>(null);
  return (
    <>
      <Button variant="link" className="text-form" onClick={() => setAsked(true)}>
        Cancel the registration…
      </Button>
      <Dialog open={asked} onClose={() => setAsked(false)} title="Cancel the registration" focusFirst={keep}>
        <p className="mb-4">
          Your place goes to the next person and can’t be taken back.{' '}
          {mine.order?.state === 'paid'
            ? 'The finance office writes to you about the refund.'
            : 'Nothing was charged.'}
        </p>
        <div className="flex gap-2">
          <Button ref={keep as never} onClick={() => setAsked(false)}>
            Keep my place
          </Button>
          <Button
            variant="danger"
            busy={cancel.isPending}
            onClick={() =>
              cancel.mutate(mine.version, {
                onSuccess: () => {
                  toast('Registration cancelled.');
                  setAsked(false);
                },
                onError: sayFailure,
              })
            }
          >
            Cancel the registration
          </Button>
        </div>
      </Dialog>
    </>
  );
}
