import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { roleNames } from '@shared/features/accounts/accounts.rules';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { QueryView } from '@/components/states';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { invitationQuery, useAcceptInvitation, useAccount } from './accounts.queries';
import { Narrow } from './narrow';

export function Component() {
  const { token = '' } = useParams();
  const query = useQuery(invitationQuery(token));
  const account = useAccount();
  const accept = useAcceptInvitation(token);
  const navigate = useNavigate();
  const [password, setPassword] = useState('');
  const submit = (event: FormEvent) => {
    event.preventDefault();
    accept.mutate(query.data?.hasPassword ? undefined : password, {
      onSuccess: () => void navigate('/home', { replace: true }),
    });
  };
  const errors = fieldErrors(accept.error);
  return (
    <Narrow title="You are invited">
      <QueryView query={query} what="the invitation">
        {(offer) => (
          <form noValidate onSubmit={submit} className="grid gap-4">
            <p>
              {offer.givenName} {offer.familyName}, as <b>{roleNames[offer.role].toLowerCase()}</b>
              {offer.scopeTitle && <> of “{offer.scopeTitle}”</>}, with the address {offer.email}.
            </p>
            {offer.hasPassword && account?.email !== offer.email ? (
              <p>
                This address has an account.{' '}
                <Link to={`/sign-in?to=/invitation/${token}`}>Sign in as {offer.email}</Link>, then this page
                takes the invitation.
              </p>
            ) : (
              <>
                {!offer.hasPassword && (
                  <Input
                    label="Choose a password"
                    type="password"
                    autoComplete="new-password"
                    value={password}
                    onChange={(e) => setPassword(e.target.value)}
                    error={errors.password}
                    hint="At least 12 characters."
                  />
                )}
                {accept.error && !errors.password && (
                  <p role="alert" className="font-semibold text-alarm">
                    {sentenceOf(accept.error)}
                  </p>
                )}
                <div>
                  <Button type="submit" variant="primary" sizing="form" busy={accept.isPending}>
                    Take the invitation
                  </Button>
                </div>
              </>
            )}
          </form>
        )}
      </QueryView>
    </Narrow>
  );
}
