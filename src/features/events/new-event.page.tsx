import { useNavigate } from 'react-router-dom';
import { toast } from '@/components/toast';
import { EventForm, emptyEvent } from './event-form';
import { useCreateEvent } from './events.queries';

export function Component() {
  const create = useCreateEvent();
  const navigate = useNavigate();
  return (
    <div className="mx-auto max-w-[820px] px-4 py-10">
      <h1 className="mb-2 font-serif text-page">New event</h1>
      <p className="mb-6 text-form text-ink2">
        It begins as a draft that only the office and its organisers see.
      </p>
      <EventForm
        values={emptyEvent}
        verb="Create the draft"
        saving={create.isPending}
        error={create.error}
        onSave={(values) =>
          create.mutate(values, {
            onSuccess: (event) => {
              toast('Draft created. Now the rooms and days.');
              void navigate(`/organise/${event.slug}/settings?part=rooms`);
            },
          })
        }
      />
    </div>
  );
}
