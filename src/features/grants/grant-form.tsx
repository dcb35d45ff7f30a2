import { useRef, useState } from 'react';
import { Link } from 'react-router-dom';
import { costKinds, type CostKind, type MyGrant } from '@shared/features/grants/grants.contract';
import { formatGrant, sumOf } from '@shared/features/grants/grants.rules';
import { Button } from '@/components/button';
import { Checkbox, Input, Select, Textarea } from '@/components/field';
import { Note } from '@/components/states';
import { toast } from '@/components/toast';
import { ownTime } from '@/lib/format';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { CostRow } from './cost-row';
import { fieldsOf, inputOf, ownErrors, type CostFields, type GrantFields } from './grant-fields';
import { useSaveMyGrant, useSubmitMyGrant } from './grants.queries';

/** The draft: saved when a field is left, handed in by the one button. */
export function GrantForm({ mine }: { mine: MyGrant }) {
  const [fields, setFields] = useState(() => fieldsOf(mine));
  const [errors, setErrors] = useState<Record<string, string>>({});
  const saved = useRef(JSON.stringify(inputOf(fieldsOf(mine), mine.currency).input));
  const version = useRef(mine.version);
  const queue = useRef<Promise<number | undefined>>(Promise.resolve(undefined));
  const save = useSaveMyGrant(mine.eventSlug);
  const submit = useSubmitMyGrant(mine.eventSlug);
  // Not while a draft is being saved: leaving a field by pressing a button starts a save, and the press must count.
  const set = (change: Partial<GrantFields>) => setFields({ ...fields, ...change });
  const setCost = (kind: CostKind) => (change: Partial<CostFields>) =>
    set({ costs: { ...fields.costs, [kind]: { ...fields.costs[kind], ...change } } });
  const { input, order, errors: unread } = inputOf(fields, mine.currency);

  const failed = (error: unknown) => {
    const found = ownErrors(fieldErrors(error), order);
    setErrors(found);
    if (Object.keys(found).length === 0) sayFailure(error);
  };
  const saveNow = async (): Promise<number | undefined> => {
    if (Object.keys(unread).length > 0) {
      setErrors(unread);
      return undefined;
    }
    if (
      version.current > 0 &&
      JSON.stringify(input) === saved.current &&
      mine.application?.state !== 'withdrawn'
    )
      return version.current;
    try {
      const now = await save.mutateAsync({ version: version.current, body: input });
      version.current = now.version;
      saved.current = JSON.stringify(input);
      setErrors({});
      return now.version;
    } catch (error) {
      failed(error);
      return undefined;
    }
  };
  /** Version after the save, or undefined when it did not work. Leaving a field and pressing a button happen at once: one save after the other. */
  const store = (): Promise<number | undefined> => {
    const next = queue.current.then(saveNow);
    queue.current = next;
    return next;
  };
  const handIn = async () => {
    const stored = await store();
    if (stored !== undefined)
      submit.mutate(
        { version: stored },
        {
          onSuccess: () => {
            toast('Your grant application is handed in.');
            window.scrollTo({ top: 0 });
          },
          onError: failed,
        },
      );
  };
  const leave = () => {
    if (JSON.stringify(input) !== saved.current) void store();
  };

  return (
    <form
      className="mt-6 grid gap-6"
      noValidate
      onBlur={(event) => event.target instanceof HTMLButtonElement || leave()}
      onSubmit={(event) => {
        event.preventDefault();
        void handIn();
      }}
    >
      <fieldset>
        <legend className="mb-1 font-serif text-title">What you ask for</legend>
        <p className="mb-2 text-ink3">
          In {mine.currency}. Leave out what you do not need. A document for each cost helps: an offer for the
          ticket, a price of the room.
        </p>
        {costKinds.map((kind) => (
          <CostRow
            key={kind}
            kind={kind}
            mine={mine}
            fields={fields.costs[kind]}
            errors={errors}
            onChange={setCost(kind)}
            beforeUpload={store}
          />
        ))}
        <p className="mt-3 flex justify-between border-t border-ink pt-2 font-semibold">
          <span>Together</span>
          <span>{formatGrant(sumOf(input.items), mine.currency)}</span>
        </p>
        {errors.items && (
          <p role="alert" className="font-semibold text-alarm">
            {errors.items}
          </p>
        )}
      </fieldset>
      <Input
        className="max-w-[240px]"
        label={`The least sum with which you can come, ${mine.currency}`}
        optional
        inputMode="decimal"
        hint="Empty when anything helps. The committee sees it when it proposes a sum."
        value={fields.least}
        onChange={(event) => set({ least: event.target.value })}
        error={errors.least}
      />
      <Textarea
        label="Why this event, and why a grant"
        rows={7}
        maxLength={4000}
        hint={`${fields.motivation.length} of 4,000 characters`}
        value={fields.motivation}
        onChange={(event) => set({ motivation: event.target.value })}
        error={errors.motivation}
      />
      {mine.talks.length > 0 && (
        <Select
          label="The talk that you give"
          optional
          placeholder="None"
          options={mine.talks.map((talk) => ({ value: talk.id, label: talk.title }))}
          value={fields.talkId}
          onChange={(event) => set({ talkId: event.target.value })}
          error={errors.talkId}
        />
      )}
      <div className="grid gap-1">
        <Checkbox
          label="This is my first meeting of this kind"
          checked={fields.firstMeeting}
          onChange={(event) => set({ firstMeeting: event.target.checked })}
        />
        <Checkbox
          label="I have no other money for the journey"
          checked={fields.noOtherMoney}
          onChange={(event) => set({ noOtherMoney: event.target.checked })}
        />
      </div>
      {(errors.country ?? errors.careerStage ?? (!mine.profile.country || !mine.profile.careerStage)) && (
        <Note kind={errors.country || errors.careerStage ? 'must' : 'wish'}>
          Funds ask for the country of your institution and your career stage.{' '}
          <Link to="/profile">Complete your profile</Link>, then hand in.
        </Note>
      )}
      <div className="flex flex-wrap items-center gap-3">
        <Button
          type="submit"
          variant="primary"
          sizing="form"
          className="max-sm:w-full"
          busy={submit.isPending}
        >
          Hand in the application
        </Button>
        <Button
          sizing="form"
          className="max-sm:w-full"
          disabled={submit.isPending}
          onClick={() => void store().then((stored) => stored !== undefined && toast('Draft saved.'))}
        >
          Save the draft
        </Button>
        <p aria-live="polite" className="text-dense text-ink3">
          {save.isPending
            ? 'Saving …'
            : mine.application
              ? `Saved ${ownTime(mine.application.savedAt)}`
              : 'Not saved yet'}
        </p>
      </div>
    </form>
  );
}
