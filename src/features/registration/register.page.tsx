import { useQuery } from '@tanstack/react-query';
import { useEffect, useState } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import type { DoorView, RegistrationInput } from '@shared/features/registration/registration.contract';
import { categoriesFor, earlyUntil } from '@shared/features/finance/finance.rules';
import { formatDateSpan, formatInstant, zoneName } from '@shared/lib/time';
import { useAccount } from '@/features/accounts/accounts.queries';
import { Button } from '@/components/button';
import { Note, QueryView } from '@/components/states';
import { ownZone } from '@/lib/format';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { Problem } from '@shared/http/problem';
import { Account } from './account';
import { ApplyForm } from './apply-form';
import { doorQuery, quoteQuery, usePay, useRegister } from './registration.queries';
import { InvoiceStep, PayStep, StayStep, YouStep, type StepProps } from './steps';
import { StepList } from './step-list';

const steps = ['You', 'Stay and extras', 'Invoice', 'Pay'] as const;
/** Which step shows a field that the server refused. */
const stepOf = (path: string): number =>
  path.startsWith('invoice')
    ? 2
    : ['categoryId', 'badgeName'].includes(path)
      ? 0
      : path === 'consent'
        ? 3
        : 1;

export function Component() {
  const { event = '' } = useParams();
  const door = useQuery(doorQuery(event));
  return (
    <QueryView query={door} what="the registration">
      {(view) => {
        if (view.registration) return <Registered view={view} />;
        const full = view.open && view.placesLeft === 0;
        if (!view.open || full) return <Closed view={view} full={full} />;
        return <Wizard key={view.eventSlug} view={view} />;
      }}
    </QueryView>
  );
}

function Registered({ view }: { view: DoorView }) {
  const navigate = useNavigate();
  useEffect(
    () => void navigate(`/events/${view.eventSlug}/registration`, { replace: true }),
    [navigate, view.eventSlug],
  );
  return null;
}

/** Not open, full, or on application: what can be done instead. */
function Closed({ view, full }: { view: DoorView; full: boolean }) {
  const canApply = full || (view.admission === 'application' && !view.application);
  return (
    <div className="mx-auto max-w-[620px] px-4 py-10 text-form">
      <p className="text-ui text-ink3">{view.eventTitle}</p>
      <h1 className="font-serif text-page">
        {full
          ? 'All places are taken'
          : view.admission === 'application'
            ? 'Apply for a place'
            : 'Registration'}
      </h1>
      <p className="mt-2 text-ink2">
        {full
          ? 'You can put yourself on the waiting list. When a place becomes free, we write to the next on it.'
          : view.closedBecause}
      </p>
      {view.application && <ApplyForm.State view={view} />}
      {canApply && <ApplyForm view={view} waiting={full} />}
      <p className="mt-8">
        <Link to={`/events/${view.eventSlug}`}>Back to the event</Link>
      </p>
    </div>
  );
}

function emptyInput(
  view: DoorView,
  account: { printedName: string; careerStage: string | null; country: string | null } | null | undefined,
): RegistrationInput {
  const category = categoriesFor(view.fees, account?.careerStage ?? null).sort((a, b) =>
    a.stages.length === 0 ? 1 : b.stages.length === 0 ? -1 : 0,
  )[0];
  return {
    categoryId: category?.id ?? '',
    extras: [],
    arrivesOn: null,
    leavesOn: null,
    badgeName: account?.printedName ?? '',
    diet: 'any',
    allergies: '',
    needs: '',
    invoice: {
      payer: 'self',
      name: account?.printedName ?? '',
      street: '',
      postcode: '',
      town: '',
      country: account?.country ?? null,
      vatNumber: '',
      orderNumber: '',
    },
    consent: false as unknown as true,
  };
}

function Wizard({ view }: { view: DoorView }) {
  const account = useAccount();
  const key = `registration ${view.eventSlug}`;
  const [input, setInput] = useState<RegistrationInput>(() => ({
    ...emptyInput(view, account),
    ...(JSON.parse(sessionStorage.getItem(key) ?? '{}') as Partial<RegistrationInput>),
  }));
  const [step, setStep] = useState(0);
  const [savedAt, setSavedAt] = useState<string>();
  const register = useRegister(view.eventSlug);
  const pay = usePay(view.eventSlug);
  const price = useQuery(
    quoteQuery(view.eventSlug, {
      categoryId: input.categoryId,
      extras: input.extras.filter((extra) => extra.quantity > 0),
    }),
  );
  const change = (next: Partial<RegistrationInput>) => {
    const merged = { ...input, ...next };
    setInput(merged);
    // Kept in this tab only, and without the health data.
    sessionStorage.setItem(key, JSON.stringify({ ...merged, allergies: '', needs: '' }));
    setSavedAt(new Date().toTimeString().slice(0, 5));
  };
  const errors = fieldErrors(register.error);
  // Awaited, not as callbacks of mutate: this page is left as soon as the place is taken.
  const finish = async () => {
    try {
      const made = await register.mutateAsync({
        ...input,
        extras: input.extras.filter((extra) => extra.quantity > 0),
      });
      sessionStorage.removeItem(key);
      if (made.order?.state !== 'paid') window.location.assign((await pay.mutateAsync(undefined)).url);
    } catch (error) {
      const first = Object.keys(fieldErrors(error))[0];
      if (first) setStep(stepOf(first));
    }
  };
  const props: StepProps = { view, input, change, errors };
  const Step = [YouStep, StayStep, InvoiceStep, PayStep][step] as typeof YouStep;
  return (
    <div className="grid min-h-[calc(100dvh-46px)] lg:grid-cols-[312px_1fr_396px]">
      <aside className="bg-paper px-12 py-10 max-lg:px-4 max-lg:py-5">
        <p className="text-ui text-ink3">Registration</p>
        <p className="font-serif text-[18px] leading-6">{view.eventTitle}</p>
        <p className="mt-1 text-ui text-ink3">
          {formatDateSpan(view.startsOn, view.endsOn)}, {view.town}
        </p>
        <StepList steps={steps} present={step} onChoose={setStep} />
        {savedAt && <p className="mt-6 text-dense text-ink3">Kept in this tab at {savedAt}.</p>}
      </aside>
      <div className="border-x border-rule bg-sheet px-14 py-9 text-form max-lg:px-4">
        <Step {...props} />
        {register.error instanceof Problem && Object.keys(errors).length === 0 && (
          <div className="mt-5">
            <Note kind="must">{sentenceOf(register.error)}</Note>
          </div>
        )}
        <div className="mt-7 flex items-center gap-3">
          {step > 0 && (
            <Button sizing="form" onClick={() => setStep(step - 1)}>
              Back
            </Button>
          )}
          {step < 3 ? (
            <Button variant="primary" sizing="form" onClick={() => setStep(step + 1)}>
              Continue
            </Button>
          ) : (
            <Button
              variant="primary"
              sizing="form"
              busy={register.isPending || pay.isPending}
              onClick={() => void finish()}
            >
              {price.data?.totalMinor === 0 ? 'Take the place' : 'Take the place and pay'}
            </Button>
          )}
          <span className="text-ui text-ink3">{step < 3 ? 'Nothing is charged yet.' : ''}</span>
        </div>
      </div>
      <aside className="bg-paper px-8 py-9 max-lg:px-4">
        {price.data && <Account price={price.data} />}
        <EarlyNote view={view} categoryId={input.categoryId} />
      </aside>
    </div>
  );
}

/** The early fee's end: day, date, time, the institute's zone; then the reader's own. */
function EarlyNote({ view, categoryId }: { view: DoorView; categoryId: string }) {
  const category = view.fees.categories.find((candidate) => candidate.id === categoryId);
  const until = category && earlyUntil(category, view.timeZone);
  if (!until || until < new Date().toISOString()) return null;
  const own = ownZone();
  return (
    <p className="mt-5 bg-cautionwash px-3 py-2.5 text-ui">
      <b className="font-semibold">Early fee until {formatInstant(until, view.timeZone)}</b> in {view.town} (
      {zoneName(until, view.timeZone)}).
      {own !== view.timeZone && (
        <>
          {' '}
          Where you are ({zoneName(until, own)}) that is {formatInstant(until, own, false)}.
        </>
      )}
    </p>
  );
}
