import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { Link, useNavigate, useSearchParams } from 'react-router-dom';
import { Button } from '@/components/button';
import { Checkbox, Input } from '@/components/field';
import { Wordmark } from '@/components/mark';
import { Plate } from '@/components/plate';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { demoAccountsQuery, sessionQuery, useSignIn } from './accounts.queries';

/** Only own paths: never to another site. */
const ownPath = (to: string | null): string => (to && /^\/(?![/\\])/.test(to) ? to : '/home');

export function Component() {
  const session = useQuery(sessionQuery).data;
  const [search] = useSearchParams();
  const navigate = useNavigate();
  const signIn = useSignIn();
  const [email, setEmail] = useState('');
  const [password, setPassword] = useState('');
  const [stay, setStay] = useState(false);
  const [show, setShow] = useState(false);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    signIn.mutate(
      { email, password, stay },
      { onSuccess: () => void navigate(ownPath(search.get('to')), { replace: true }) },
    );
  };
  const errors = fieldErrors(signIn.error);
  return (
    <div className="grid min-h-dvh lg:grid-cols-[860fr_580fr]">
      <aside className="sticky top-0 h-dvh bg-[#101A17] max-lg:hidden">
        <Plate />
      </aside>
      <main className="bg-sheet px-[clamp(20px,8vw,108px)] py-[clamp(28px,9vh,96px)] text-form">
        <Link to="/" className="quiet text-ink">
          <Wordmark height={54} />
        </Link>
        <p className="mt-3 text-ink3">{session?.instituteName}</p>
        <h1 className="mt-12 mb-4 font-serif text-[26px] leading-8">Sign in</h1>
        <form onSubmit={submit} className="grid max-w-[364px] gap-4" noValidate>
          <Input
            label="E-mail"
            type="email"
            name="email"
            autoComplete="username"
            value={email}
            onChange={(e) => setEmail(e.target.value)}
            error={errors.email}
          />
          <div className="relative">
            <Input
              label="Password"
              type={show ? 'text' : 'password'}
              name="password"
              autoComplete="current-password"
              value={password}
              onChange={(e) => setPassword(e.target.value)}
              error={errors.password}
              aside={
                <Link to="/reset" className="text-ui">
                  Forgotten?
                </Link>
              }
            />
            <button
              type="button"
              className="absolute top-[27px] right-2 min-h-[32px] px-1 text-ui text-act underline"
              aria-pressed={show}
              onClick={() => setShow(!show)}
            >
              {show ? 'Hide' : 'Show'}
            </button>
          </div>
          <Checkbox
            label="Stay signed in on this computer for 30 days"
            checked={stay}
            onChange={(e) => setStay(e.target.checked)}
          />
          {signIn.error && !errors.password && (
            <p role="alert" className="text-ui font-semibold text-alarm">
              {sentenceOf(signIn.error)}
            </p>
          )}
          <Button type="submit" variant="primary" sizing="form" busy={signIn.isPending}>
            Sign in
          </Button>
        </form>
        <p className="mt-6 max-w-[364px] text-ink2">
          New here? <Link to="/sign-up">Open an account</Link>. Speakers need no account first: use the link
          in our letter.
        </p>
        {session?.demo && (
          <DemoAccounts
            onChoose={(account) => {
              setEmail(account.email);
              setPassword(account.password);
            }}
          />
        )}
      </main>
    </div>
  );
}

function DemoAccounts({ onChoose }: { onChoose: (account: { email: string; password: string }) => void }) {
  const accounts = useQuery(demoAccountsQuery).data ?? [];
  return (
    <section className="mt-8 max-w-[364px]" aria-label="Demo accounts">
      <h2 className="mb-1 text-ui font-semibold">Demo accounts, invented people</h2>
      <table className="ruled text-ui">
        <tbody>
          {accounts.map((account) => (
            <tr key={account.email}>
              <td className="text-ink2">{account.role}</td>
              <td>
                <button
                  type="button"
                  className="min-h-[24px] text-left text-act underline"
                  onClick={() => onChoose(account)}
                >
                  {account.email}
                </button>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="mt-1 text-dense text-ink3">A click fills in the address and the password.</p>
    </section>
  );
}
