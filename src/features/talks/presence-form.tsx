import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router-dom';
import type { PresenceInput, Stage } from '@shared/features/talks/talks-stay.contract';
import { presenceErrors } from '@shared/features/talks/talks.rules';
import { addDays } from '@shared/lib/time';
import { Button } from '@/components/button';
import { Input, Textarea } from '@/components/field';
import { QueryView } from '@/components/states';
import { fieldErrors } from '@/lib/problem';
import { SaveLine, StaleNote } from './save-line';
import { StayBar } from './stay-bar';
import { presenceQuery, usePresenceSaver } from './talks.queries';
import { useAutosave } from './use-autosave';

type Presence = PresenceInput & { version: number };
const inputOf = ({ version: _version, ...input }: Presence): PresenceInput => input;

/** When the speaker is there; saved as it is filled in. `compact` leaves times away and wishes to the travel page. */
export function PresenceForm({ stage, compact = false }: { stage: Stage; compact?: boolean }) {
  const query = useQuery({ ...presenceQuery(stage.slug), staleTime: Infinity });
  return (
    <QueryView query={query} what="your stay">
      {(presence) => <Form stage={stage} presence={presence} compact={compact} />}
    </QueryView>
  );
}

function Form({ stage, presence, compact }: { stage: Stage; presence: Presence; compact: boolean }) {
  const saver = usePresenceSaver(stage.slug);
  const draft = useAutosave<PresenceInput>({
    initial: inputOf(presence),
    version: presence.version,
    save: saver.save,
    reload: async () => {
      const fresh = await saver.reload();
      return { value: inputOf(fresh), version: fresh.version };
    },
  });
  const stay = draft.value;
  const errors = { ...presenceErrors(stay), ...fieldErrors(draft.error) };
  const set = (part: Partial<PresenceInput>) => draft.change({ ...stay, ...part });
  return (
    <div className="grid gap-3">
      {draft.state === 'stale' && (
        <StaleNote
          what="your stay"
          onMine={() => void draft.resolve('mine')}
          onTheirs={() => void draft.resolve('theirs')}
        />
      )}
      <div className={`grid gap-3 ${compact ? '' : 'sm:grid-cols-2'}`}>
        <Input
          dense={compact}
          label="Arrive"
          type="datetime-local"
          value={stay.arrivesAt ?? ''}
          error={errors.arrivesAt}
          onChange={(event) => set({ arrivesAt: event.target.value.slice(0, 16) || null })}
        />
        <Input
          dense={compact}
          label="Leave"
          type="datetime-local"
          value={stay.leavesAt ?? ''}
          error={errors.leavesAt}
          onChange={(event) => set({ leavesAt: event.target.value.slice(0, 16) || null })}
        />
      </div>
      <StayBar startsOn={stage.startsOn} endsOn={stage.endsOn} stay={stay} />
      {compact && (
        <Link className="text-dense" to={`/events/${stage.slug}/my-travel`}>
          Times away and wishes
        </Link>
      )}
      {!compact && (
        <Away stage={stage} stay={stay} errors={errors} onChange={(blocked) => set({ blocked })} />
      )}
      {!compact && (
        <Textarea
          label="Wishes about the time"
          optional
          maxLength={1000}
          value={stay.wishes}
          hint="For instance: rather in the morning; not right after lunch. The organisers read this."
          onChange={(event) => set({ wishes: event.target.value })}
        />
      )}
      <p className="text-dense text-ink3">
        All times are local times in {stage.town} ({stage.timeZone.replaceAll('_', ' ')}).
      </p>
      <SaveLine
        what="Stay"
        state={draft.state}
        savedAt={draft.savedAt}
        error={draft.error}
        onRetry={() => void draft.flush()}
      />
    </div>
  );
}

function Away({
  stage,
  stay,
  errors,
  onChange,
}: {
  stage: Stage;
  stay: PresenceInput;
  errors: Record<string, string>;
  onChange: (blocked: PresenceInput['blocked']) => void;
}) {
  const put = (index: number, part: Partial<PresenceInput['blocked'][number]>) =>
    onChange(stay.blocked.map((row, at) => (at === index ? { ...row, ...part } : row)));
  const last = stay.blocked[stay.blocked.length - 1];
  const next = last ? addDays(last.from.slice(0, 10), 1) : stage.startsOn;
  return (
    <fieldset>
      <legend className="font-semibold">
        Times away within the stay <span className="font-normal text-ink3">optional</span>
      </legend>
      <p className="mb-2 text-dense text-ink3">No talk of yours is put there.</p>
      <div className="grid gap-3">
        {stay.blocked.map((away, index) => (
          <div key={index} className="grid items-end gap-3 sm:grid-cols-[1fr_1fr_auto]">
            <Input
              label="From"
              type="datetime-local"
              value={away.from}
              error={errors[`blocked.${index}.from`]}
              onChange={(event) =>
                event.target.value && put(index, { from: event.target.value.slice(0, 16) })
              }
            />
            <Input
              label="To"
              type="datetime-local"
              value={away.to}
              error={errors[`blocked.${index}.to`]}
              onChange={(event) => event.target.value && put(index, { to: event.target.value.slice(0, 16) })}
            />
            <Button sizing="form" onClick={() => onChange(stay.blocked.filter((_, at) => at !== index))}>
              Remove this time
            </Button>
          </div>
        ))}
      </div>
      {stay.blocked.length < 20 && (
        <Button
          className="mt-2"
          sizing="form"
          onClick={() => onChange([...stay.blocked, { from: `${next}T09:00`, to: `${next}T12:00` }])}
        >
          Add a time away
        </Button>
      )}
    </fieldset>
  );
}
