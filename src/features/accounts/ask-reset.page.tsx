import { useState, type FormEvent } from 'react';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useAskReset } from './accounts.queries';
import { Narrow } from './narrow';

export function Component() {
  const ask = useAskReset();
  const [email, setEmail] = useState('');
  const submit = (event: FormEvent) => {
    event.preventDefault();
    ask.mutate(email);
  };
  if (ask.isSuccess) {
    return (
      <Narrow
        title="Look into your mailbox"
        lead={`If ${email} has an account, a link for a new password is on its way. It is good for two hours.`}
      >
        {null}
      </Narrow>
    );
  }
  return (
    <Narrow title="Set a new password" lead="We send a link to the address of your account.">
      <form noValidate onSubmit={submit} className="grid gap-4">
        <Input
          label="E-mail"
          type="email"
          autoComplete="username"
          value={email}
          onChange={(e) => setEmail(e.target.value)}
          error={fieldErrors(ask.error).email}
        />
        {ask.error && !fieldErrors(ask.error).email && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(ask.error)}
          </p>
        )}
        <div>
          <Button type="submit" variant="primary" sizing="form" busy={ask.isPending}>
            Send the link
          </Button>
        </div>
      </form>
    </Narrow>
  );
}
