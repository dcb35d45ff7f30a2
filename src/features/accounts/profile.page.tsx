import { zodResolver } from '@hookform/resolvers/zod';
import { useQuery } from '@tanstack/react-query';
import { useState, type FormEvent } from 'react';
import { useForm } from 'react-hook-form';
import type { z } from 'zod';
import { careerStages, profileInput, type Account } from '@shared/features/accounts/accounts.contract';
import { careerStageNames } from '@shared/features/accounts/accounts.rules';
import { Button } from '@/components/button';
import { Input, Select } from '@/components/field';
import { SectionHead } from '@/components/page-bar';
import { QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { countryOptions } from '@/lib/countries';
import { ownTime } from '@/lib/format';
import { fieldErrors, sayFailure, sentenceOf } from '@/lib/problem';
import {
  sessionsQuery,
  useAccount,
  useChangePassword,
  useEndSession,
  useSaveProfile,
} from './accounts.queries';

type Values = z.input<typeof profileInput>;
const stages = careerStages.map((value) => ({ value, label: careerStageNames[value] }));
const zones = Intl.supportedValuesOf('timeZone').map((value) => ({
  value,
  label: value.replaceAll('_', ' '),
}));

export function Component() {
  const account = useAccount();
  if (!account) return null;
  return (
    <div className="mx-auto grid max-w-[1000px] gap-10 px-4 py-10 text-form lg:grid-cols-[1fr_340px]">
      <ProfileForm key={account.version} account={account} />
      <div className="grid content-start gap-10">
        <Sessions />
        <Password />
      </div>
    </div>
  );
}

function ProfileForm({ account }: { account: Account }) {
  const save = useSaveProfile(account.version);
  const { givenName, familyName, printedName, affiliation, country, careerStage, orcid, timeZone } = account;
  const form = useForm<Values>({
    resolver: zodResolver(profileInput as unknown as z.ZodType<Values, Values>),
    mode: 'onTouched',
    defaultValues: { givenName, familyName, printedName, affiliation, country, careerStage, orcid, timeZone },
  });
  const server = fieldErrors(save.error);
  const error = (name: keyof Values): string | undefined =>
    form.formState.errors[name]?.message ?? server[name];
  const empty = (value: string): string | null => value || null;
  const send = (values: Values) => save.mutate(values as never, { onSuccess: () => toast('Profile saved.') });
  return (
    <form
      noValidate
      className="grid content-start gap-4"
      onSubmit={(event) => void form.handleSubmit(send)(event)}
    >
      <h1 className="font-serif text-page">Profile</h1>
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
        label="Name as printed"
        {...form.register('printedName')}
        error={error('printedName')}
        hint="On badges, in the programme and on certificates."
      />
      <Input
        label="Affiliation"
        autoComplete="organization"
        optional
        {...form.register('affiliation')}
        error={error('affiliation')}
      />
      <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
        <Select
          label="Country of the affiliation"
          optional
          autoComplete="country"
          options={countryOptions}
          placeholder="Not said"
          {...form.register('country', { setValueAs: empty })}
          error={error('country')}
        />
        <Select
          label="Career stage"
          optional
          options={stages}
          placeholder="Not said"
          {...form.register('careerStage', { setValueAs: empty })}
          error={error('careerStage')}
          hint="Decides fee and grants."
        />
      </div>
      <div className="grid grid-cols-2 gap-4 max-sm:grid-cols-1">
        <Input
          label="ORCID iD"
          optional
          placeholder="0000-0000-0000-0000"
          {...form.register('orcid', { setValueAs: (v: string | null) => v || null })}
          error={error('orcid')}
        />
        <Select
          label="Time zone"
          options={zones}
          {...form.register('timeZone')}
          error={error('timeZone')}
          hint="Deadlines are also shown in it."
        />
      </div>
      <Input
        label="E-mail"
        value={account.email}
        readOnly
        hint="Locked: the office changes it after checking."
      />
      {save.error && Object.keys(server).length === 0 && (
        <p role="alert" className="font-semibold text-alarm">
          {sentenceOf(save.error)}
        </p>
      )}
      <div>
        <Button type="submit" variant="primary" sizing="form" busy={save.isPending}>
          Save the profile
        </Button>
      </div>
    </form>
  );
}

function Sessions() {
  const query = useQuery(sessionsQuery);
  const end = useEndSession();
  return (
    <section>
      <SectionHead title="Open sessions" />
      <QueryView query={query} what="your sessions">
        {({ items }) => (
          <table className="ruled text-ui">
            <tbody>
              {items.map((item) => (
                <tr key={item.id}>
                  <td>
                    {item.device}
                    <span className="block text-dense text-ink3">seen {ownTime(item.lastSeenAt)}</span>
                  </td>
                  <td className="num">
                    {item.present ? (
                      'this one'
                    ) : (
                      <Button variant="link" onClick={() => end.mutate(item.id, { onError: sayFailure })}>
                        End it
                      </Button>
                    )}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        )}
      </QueryView>
    </section>
  );
}

function Password() {
  const change = useChangePassword();
  const [current, setCurrent] = useState('');
  const [password, setPassword] = useState('');
  const errors = fieldErrors(change.error);
  const submit = (event: FormEvent) => {
    event.preventDefault();
    change.mutate(
      { current, password },
      {
        onSuccess: () => {
          toast('Password changed. Other sessions have ended.');
          setCurrent('');
          setPassword('');
        },
      },
    );
  };
  return (
    <form noValidate className="grid gap-3" onSubmit={submit}>
      <SectionHead title="Password" />
      <Input
        label="Present password"
        type="password"
        autoComplete="current-password"
        value={current}
        onChange={(e) => setCurrent(e.target.value)}
        error={errors.current}
      />
      <Input
        label="New password"
        type="password"
        autoComplete="new-password"
        value={password}
        onChange={(e) => setPassword(e.target.value)}
        error={errors.password}
      />
      {change.error && Object.keys(errors).length === 0 && (
        <p role="alert" className="font-semibold text-alarm">
          {sentenceOf(change.error)}
        </p>
      )}
      <div>
        <Button type="submit" busy={change.isPending}>
          Change the password
        </Button>
      </div>
    </form>
  );
}
