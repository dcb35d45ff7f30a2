import { zodResolver } from '@hookform/resolvers/zod';
import { useForm } from 'react-hook-form';
import { Link } from 'react-router-dom';
import { signUp } from '@shared/features/accounts/accounts.contract';
import type { z } from 'zod';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { ownZone } from '@/lib/format';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useSignUp } from './accounts.queries';
import { Narrow } from './narrow';

type Values = { email: string; password: string; givenName: string; familyName: string; timeZone: string };

export function Component() {
  const send = useSignUp();
  const form = useForm<Values>({
    resolver: zodResolver(signUp.body as z.ZodType<Values, Values>),
    mode: 'onTouched',
    defaultValues: { email: '', password: '', givenName: '', familyName: '', timeZone: ownZone() },
  });
  const server = fieldErrors(send.error);
  const error = (name: keyof Values): string | undefined =>
    form.formState.errors[name]?.message ?? server[name];
  if (send.isSuccess) {
    return (
      <Narrow
        title="Look into your mailbox"
        lead={`We have written to ${form.getValues('email')}. The link in the letter confirms the address and opens the account; it is good for two days.`}
      >
        <Link to="/sign-in">To the sign-in page</Link>
      </Narrow>
    );
  }
  return (
    <Narrow
      title="Open an account"
      lead="For applying, registering, giving a talk and asking for a travel grant. One person, one account."
    >
      <form
        noValidate
        className="grid gap-4"
        onSubmit={(event) => void form.handleSubmit((values) => send.mutate(values))(event)}
      >
        <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
          <Input
            label="Given name"
            autoComplete="given-name"
            {...form.register('givenName')}
            error={error('givenName')}
          />
          <Input
            label="Family name"
            autoComplete="family-name"
            {...form.register('familyName')}
            error={error('familyName')}
          />
        </div>
        <Input
          label="E-mail"
          type="email"
          autoComplete="email"
          {...form.register('email')}
          error={error('email')}
        />
        <Input
          label="Password"
          type="password"
          autoComplete="new-password"
          {...form.register('password')}
          error={error('password')}
          hint="At least 12 characters. A short sentence is easy to remember."
        />
        <p className="text-ui text-ink3">
          We keep your name and address to run the events that you take part in. What else is asked for, and
          who sees it, is said where it is asked.
        </p>
        {send.error && Object.keys(server).length === 0 && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(send.error)}
          </p>
        )}
        <div>
          <Button type="submit" variant="primary" sizing="form" busy={send.isPending}>
            Open the account
          </Button>
        </div>
      </form>
    </Narrow>
  );
}
