import { zodResolver } from '@hookform/resolvers/zod';
import { useForm, useWatch } from 'react-hook-form';
import type { z } from 'zod';
import { eventInput, eventKinds, type EventInput } from '@shared/features/events/events.contract';
import { eventKindNames } from '@shared/features/events/events.rules';
import { Button } from '@/components/button';
import { Checkbox, Input, Select, Textarea } from '@/components/field';
import { fieldErrors, sentenceOf } from '@/lib/problem';

type Values = z.input<typeof eventInput>;
const kinds = eventKinds.map((value) => ({ value, label: eventKindNames[value] }));
const zones = Intl.supportedValuesOf('timeZone').map((value) => ({
  value,
  label: value.replaceAll('_', ' '),
}));
const admissions = [
  { value: 'open', label: 'Open registration' },
  { value: 'application', label: 'Application with decision' },
];
const currencies = ['EUR', 'DKK', 'SEK', 'NOK', 'CHF', 'GBP', 'USD', 'JPY', 'KWD', 'PLN', 'CZK', 'HUF'].map(
  (value) => ({ value, label: value }),
);

export const emptyEvent: EventInput = {
  kind: 'conference',
  title: '',
  shortTitle: '',
  startsOn: '',
  endsOn: '',
  timeZone: Intl.DateTimeFormat().resolvedOptions().timeZone || 'Europe/Copenhagen',
  currency: 'EUR',
  venue: '',
  town: '',
  capacity: 60,
  admission: 'open',
  contactEmail: '',
  texts: { lead: '', practical: '', travel: '', safeguarding: '' },
  admitsMinors: false,
};

/** The particulars of an event; the same form creates and edits. Nothing typed is lost when saving fails. */
export function EventForm({
  values,
  onSave,
  saving,
  error,
  verb,
}: {
  values: EventInput;
  onSave: (values: EventInput) => void;
  saving: boolean;
  error: unknown;
  verb: string;
}) {
  const form = useForm<Values>({
    resolver: zodResolver(eventInput as unknown as z.ZodType<Values, Values>),
    mode: 'onTouched',
    defaultValues: values,
  });
  const server = fieldErrors(error);
  const wrong = (name: string): string | undefined => {
    const [head, tail] = name.split('.') as [keyof Values, string | undefined];
    const own = form.formState.errors[head] as { message?: string } & Record<
      string,
      { message?: string } | undefined
    >;
    return (tail ? own?.[tail]?.message : own?.message) ?? server[name];
  };
  const minors = useWatch({ control: form.control, name: 'admitsMinors' });
  return (
    <form
      noValidate
      className="grid max-w-[760px] gap-4 text-form"
      onSubmit={(event) => void form.handleSubmit((data) => onSave(data as EventInput))(event)}
    >
      <div className="grid grid-cols-[220px_1fr] gap-4 max-sm:grid-cols-1">
        <Select label="Kind" options={kinds} {...form.register('kind')} error={wrong('kind')} />
        <Input label="Title" {...form.register('title')} error={wrong('title')} />
      </div>
      <div className="grid grid-cols-3 gap-4 max-sm:grid-cols-1">
        <Input
          label="Short title"
          hint="For narrow places"
          {...form.register('shortTitle')}
          error={wrong('shortTitle')}
        />
        <Input label="First day" type="date" {...form.register('startsOn')} error={wrong('startsOn')} />
        <Input label="Last day" type="date" {...form.register('endsOn')} error={wrong('endsOn')} />
      </div>
      <div className="grid grid-cols-3 gap-4 max-sm:grid-cols-1">
        <Input label="Venue" {...form.register('venue')} error={wrong('venue')} />
        <Input label="Town" {...form.register('town')} error={wrong('town')} />
        <Select
          label="Time zone"
          options={zones}
          hint="All times of the event are in it"
          {...form.register('timeZone')}
          error={wrong('timeZone')}
        />
      </div>
      <div className="grid grid-cols-3 gap-4 max-sm:grid-cols-1">
        <Input
          label="Places"
          type="number"
          min={1}
          {...form.register('capacity', { valueAsNumber: true })}
          error={wrong('capacity')}
        />
        <Select
          label="Admission"
          options={admissions}
          {...form.register('admission')}
          error={wrong('admission')}
        />
        <Select
          label="Currency of fees"
          options={currencies}
          {...form.register('currency')}
          error={wrong('currency')}
        />
      </div>
      <Input
        label="E-mail for questions"
        type="email"
        {...form.register('contactEmail')}
        error={wrong('contactEmail')}
      />
      <Textarea
        label="Paragraph for the public page"
        rows={4}
        {...form.register('texts.lead')}
        error={wrong('texts.lead')}
        hint="Needed before the event can be announced."
      />
      <Textarea
        label="Practical matters"
        optional
        rows={4}
        {...form.register('texts.practical')}
        error={wrong('texts.practical')}
      />
      <Textarea
        label="Getting there"
        optional
        rows={3}
        {...form.register('texts.travel')}
        error={wrong('texts.travel')}
      />
      <Checkbox label="Admits people under 18" {...form.register('admitsMinors')} />
      {minors && (
        <Textarea
          label="Responsible adult and local policy"
          rows={3}
          {...form.register('texts.safeguarding')}
          error={wrong('texts.safeguarding')}
          hint="An event that admits under-18s must name a responsible adult and the local policy; it stands on the public page."
        />
      )}
      {Boolean(error) && Object.keys(server).length === 0 && (
        <p role="alert" className="font-semibold text-alarm">
          {sentenceOf(error)}
        </p>
      )}
      <div>
        <Button type="submit" variant="primary" sizing="form" busy={saving}>
          {verb}
        </Button>
      </div>
    </form>
  );
}
