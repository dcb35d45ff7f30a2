import { useState, type FormEvent } from 'react';
import { useNavigate, useParams } from 'react-router-dom';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useReset } from './accounts.queries';
import { Narrow } from './narrow';

export function Component() {
  const { token = '' } = useParams();
  const reset = useReset();
  const navigate = useNavigate();
  const [password, setPassword] = useState('');
  const submit = (event: FormEvent) => {
    event.preventDefault();
    reset.mutate({ token, password }, { onSuccess: () => void navigate('/home', { replace: true }) });
  };
  const errors = fieldErrors(reset.error);
  return (
    <Narrow title="Choose a new password" lead="All open sessions of the account end.">
      <form noValidate onSubmit={submit} className="grid gap-4">
        <Input
          label="New password"
          type="password"
          autoComplete="new-password"
          value={password}
          onChange={(e) => setPassword(e.target.value)}
          error={errors.password}
          hint="At least 12 characters."
        />
        {reset.error && !errors.password && (
          <p role="alert" className="font-semibold text-alarm">
            {sentenceOf(reset.error)}
          </p>
        )}
        <div>
          <Button type="submit" variant="primary" sizing="form" busy={reset.isPending}>
            Set the password
          </Button>
        </div>
      </form>
    </Narrow>
  );
}
