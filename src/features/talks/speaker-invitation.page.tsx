import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import type { ResponseOf } from '@shared/http/endpoint';
import type { readSpeakerInvitation } from '@shared/features/talks/talks-invitation.contract';
import { talkKindNames } from '@shared/features/talks/talks.rules';
import { formatDateSpan } from '@shared/lib/time';
import { useAccount } from '@/features/accounts/accounts.queries';
import { Button, LinkButton } from '@/components/button';
import { Choices, Input, Textarea } from '@/components/field';
import { Facts } from '@/components/page-bar';
import { EmptyState, ErrorState, Loading } from '@/components/states';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { speakerInvitationQuery, useAnswerInvitation } from './talks.queries';

type Offer = ResponseOf<typeof readSpeakerInvitation>;

/** The page behind the link of the letter: it works without a password. */
export function Component() {
  const { token = '' } = useParams();
  const query = useQuery(speakerInvitationQuery(token));
  // The session is renewed by the answer, which forgets what was read: the offer stays here.
  const [offer, setOffer] = useState<Offer>();
  if (query.data && !offer) setOffer(query.data);
  return (
    <div className="mx-auto max-w-[640px] px-4 py-12 text-form">
      {offer ? (
        <Invitation token={token} offer={offer} />
      ) : query.error ? (
        <Spent error={query.error} />
      ) : (
        <Loading what="the invitation" />
      )}
    </div>
  );
}

function Spent({ error }: { error: unknown }) {
  return (
    <>
      <h1 className="m-0 mb-4 font-serif text-page font-medium">Invitation</h1>
      <ErrorState error={error} what="This invitation can’t be opened." />
      <p className="mt-4">
        If you have answered it, your talk is under <Link to="/home">your own pages</Link>.
      </p>
    </>
  );
}

function Invitation({ token, offer }: { token: string; offer: Offer }) {
  const account = useAccount();
  const navigate = useNavigate();
  const answer = useAnswerInvitation(token);
  const [choice, setChoice] = useState<'accepted' | 'declined'>('accepted');
  const [note, setNote] = useState('');
  const [password, setPassword] = useState('');
  const errors = fieldErrors(answer.error);
  const newcomer = choice === 'accepted' && !offer.hasPassword;
  const submit = (event: FormEvent) => {
    event.preventDefault();
    answer.mutate(
      { answer: choice, note, password: newcomer ? password : undefined },
      {
        onSuccess: (result) =>
          result.answer === 'accepted' &&
          result.session.account?.email === offer.email &&
          void navigate(`/events/${result.eventSlug}/my-talks/${result.talkId}`, { replace: true }),
      },
    );
  };
  if (answer.data)
    return (
      <Answered
        offer={offer}
        answer={answer.data.answer}
        signedIn={account?.email === offer.email}
        talk={answer.data.talkId}
      />
    );
  return (
    <>
      <h1 className="font-serif text-page">Invitation to speak</h1>
      <p className="mt-2">Dear {offer.name},</p>
      {offer.message ? (
        offer.message.split(/\n{2,}/).map((part, index) => (
          <p key={index} className="mt-2 font-serif text-abstract whitespace-pre-line">
            {part}
          </p>
        ))
      ) : (
        <p className="mt-2 font-serif text-abstract">the organisers would be glad if you gave a talk.</p>
      )}
      <div className="my-5 border-y border-ink py-3">
        <Facts
          items={[
            ['Event', offer.eventTitle],
            ['When', formatDateSpan(offer.startsOn, offer.endsOn)],
            ['Where', offer.town],
            [
              'Talk',
              `${talkKindNames[offer.kind]}, ${offer.minutes} minutes, ${offer.questionMinutes} of them for questions`,
            ],
          ]}
        />
      </div>
      <form noValidate onSubmit={submit} className="grid gap-4">
        <Choices
          legend="Your answer"
          name="answer"
          value={choice}
          onChange={setChoice}
          options={[
            { value: 'accepted', label: 'I accept' },
            { value: 'declined', label: 'I decline' },
          ]}
        />
        {newcomer && (
          <Input
            label="Choose a password"
            type="password"
            autoComplete="new-password"
            value={password}
            error={errors.password}
            hint={`At least 12 characters. With ${offer.email} it opens your pages for abstract, slides and travel.`}
            onChange={(event) => setPassword(event.target.value)}
          />
        )}
        <Textarea
          label="A word to the organisers"
          optional
          maxLength={2000}
          value={note}
          onChange={(event) => setNote(event.target.value)}
        />
        {answer.error && !errors.password && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(answer.error)}
          </p>
        )}
        <div>
          <Button type="submit" variant="primary" sizing="form" busy={answer.isPending}>
            {choice === 'accepted' ? 'Accept the invitation' : 'Decline the invitation'}
          </Button>
        </div>
      </form>
    </>
  );
}

function Answered({
  offer,
  answer,
  signedIn,
  talk,
}: {
  offer: Offer;
  answer: 'accepted' | 'declined';
  signedIn: boolean;
  talk: string;
}) {
  if (answer === 'declined')
    return (
      <EmptyState title="You have declined." fact="The organisers have been told. Thank you for answering." />
    );
  const to = `/events/${offer.eventSlug}/my-talks/${talk}`;
  return (
    <EmptyState
      title="You have accepted."
      fact="Next: when you arrive and leave, the abstract, and later the slides."
      action={
        <LinkButton
          variant="primary"
          sizing="form"
          to={signedIn ? to : `/sign-in?to=${encodeURIComponent(to)}`}
        >
          {signedIn ? 'Open your talk' : `Sign in as ${offer.email}`}
        </LinkButton>
      }
    />
  );
}
