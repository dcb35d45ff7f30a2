import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router-dom';
import type { EventDetail, EventState } from '@shared/features/events/events.contract';
import { eventStateNames } from '@shared/features/events/events.rules';
import { Button, LinkButton } from '@/components/button';
import { Dialog } from '@/components/dialog';
import { Segmented } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { Note, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { Problem } from '@shared/http/problem';
import { DaysEditor } from './days-editor';
import { DeadlinesEditor } from './deadlines-editor';
import { EventForm } from './event-form';
import { eventQuery, useChangeEventState, useUpdateEvent } from './events.queries';
import { RoomsEditor } from './rooms-editor';

const parts = [
  { value: 'event', label: 'Event' },
  { value: 'rooms', label: 'Rooms' },
  { value: 'days', label: 'Days' },
  { value: 'deadlines', label: 'Deadlines' },
] as const;
type Part = (typeof parts)[number]['value'];

export function Component() {
  const { event: slug = '' } = useParams();
  const query = useQuery(eventQuery(slug));
  const [search, setSearch] = useSearchParams();
  const part = (parts.find((entry) => entry.value === search.get('part'))?.value ?? 'event') as Part;
  return (
    <QueryView query={query} what="the event">
      {(event) => (
        <>
          <PageBar
            title="Settings"
            facts={eventStateNames[event.state]}
            controls={
              <Segmented
                label="Part of the settings"
                options={parts}
                value={part}
                onChange={(value) => setSearch({ part: value })}
              />
            }
            actions={
              <>
                <LinkButton to={`/organise/${slug}/settings/fees`}>Fees and extras</LinkButton>
                <NextSteps event={event} />
              </>
            }
          />
          <div className="p-6 max-sm:p-4">
            {part === 'event' && <Particulars key={event.version} event={event} />}
            {part === 'rooms' && <RoomsEditor event={event} />}
            {part === 'days' && <DaysEditor event={event} />}
            {part === 'deadlines' && <DeadlinesEditor event={event} />}
          </div>
        </>
      )}
    </QueryView>
  );
}

function Particulars({ event }: { event: EventDetail }) {
  const save = useUpdateEvent(event.slug);
  const {
    kind,
    title,
    shortTitle,
    startsOn,
    endsOn,
    timeZone,
    currency,
    venue,
    town,
    capacity,
    admission,
    contactEmail,
    texts,
    admitsMinors,
  } = event;
  return (
    <>
      {save.error instanceof Problem && save.error.status === 412 && (
        <div className="mb-4 max-w-[760px]">
          <Note kind="must">
            Somebody else has saved this event meanwhile. Your text is still in the form.{' '}
            <Link to={`/organise/${event.slug}/settings`} target="_blank">
              Open the present version beside it
            </Link>
            , compare, then load this page again.
          </Note>
        </div>
      )}
      <EventForm
        values={{
          kind,
          title,
          shortTitle,
          startsOn,
          endsOn,
          timeZone,
          currency,
          venue,
          town,
          capacity,
          admission,
          contactEmail,
          texts,
          admitsMinors,
        }}
        verb="Save the event"
        saving={save.isPending}
        error={save.error}
        onSave={(body) =>
          save.mutate({ version: event.version, body }, { onSuccess: () => toast('Event saved.') })
        }
      />
    </>
  );
}

const verbs: Record<EventState, string> = {
  draft: 'Back to draft',
  announced: 'Announce',
  open: 'Open registration',
  running: 'Start the event',
  finished: 'Close the event',
  archived: 'Archive',
};

/** The next steps in the life of an event, each with what is still missing. */
function NextSteps({ event }: { event: EventDetail }) {
  const [asked, setAsked] = useState<EventDetail['nextStates'][number]>();
  const change = useChangeEventState(event.slug);
  if (!event.can.announce) return null;
  const forward = event.nextStates[0];
  const go = (to: EventState) =>
    change.mutate(
      { version: event.version, to },
      {
        onSuccess: () => {
          toast(`The event is ${eventStateNames[to].toLowerCase()} now.`);
          setAsked(undefined);
        },
        onError: sayFailure,
      },
    );
  return (
    <>
      {event.nextStates.slice(1).map((step) => (
        <Button key={step.to} onClick={() => setAsked(step)}>
          {verbs[step.to]}…
        </Button>
      ))}
      {forward && (
        <Button
          variant={forward.missing.length === 0 ? 'primary' : 'secondary'}
          onClick={() => setAsked(forward)}
        >
          {verbs[forward.to]}…
        </Button>
      )}
      <Dialog
        open={asked !== undefined}
        onClose={() => setAsked(undefined)}
        title={asked ? verbs[asked.to] : ''}
      >
        {asked && (
          <div className="grid gap-4">
            {asked.missing.length > 0 ? (
              <>
                <p>Still missing:</p>
                <ul className="list-disc pl-5">
                  {asked.missing.map((line) => (
                    <li key={line}>{line}</li>
                  ))}
                </ul>
              </>
            ) : (
              <p>
                The event becomes {eventStateNames[asked.to].toLowerCase()}.{' '}
                {asked.to === 'announced' && event.state === 'draft'
                  ? 'Its page is public from then on.'
                  : ''}
              </p>
            )}
            <div className="flex gap-2">
              {asked.missing.length === 0 && (
                <Button variant="primary" busy={change.isPending} onClick={() => go(asked.to)}>
                  {verbs[asked.to]}
                </Button>
              )}
              <Button onClick={() => setAsked(undefined)}>Leave it</Button>
            </div>
          </div>
        )}
      </Dialog>
    </>
  );
}
