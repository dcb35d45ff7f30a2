import { useQuery } from '@tanstack/react-query';
import { useEffect, useState, type FormEvent } from 'react';
import { Link, useNavigate, useParams } from 'react-router-dom';
import { abstractInput, type AbstractInput } from '@shared/features/talks/talks-abstract.contract';
import { useAccount } from '@/features/accounts/accounts.queries';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { EmptyState, QueryView } from '@/components/states';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { emptyAbstract } from './abstract-fields';
import { PreviewPane } from './abstract-preview';
import { AbstractSource } from './abstract-source';
import { CoAuthors } from './co-authors';
import { deadlineWords } from './deadline-words';
import { NeedsList } from './needs-list';
import { ReferencesField } from './references-field';
import { SubjectsField } from './subjects-field';
import { callQuery, useSubmitTalk } from './talks.queries';
import { useAbstractProblems } from './use-abstract-problems';

/** Answer to the call for abstracts. */
export function Component() {
  const { event = '' } = useParams();
  const query = useQuery(callQuery(event));
  return (
    <div className="mx-auto max-w-[1180px] px-4 py-8">
      <QueryView query={query} what="the call for abstracts">
        {(call) => (
          <>
            <h1 className="font-serif text-page">Submit a talk</h1>
            <p className="mt-1 mb-6 text-form text-ink2">
              {call.title}. Contributed talks take {call.minutes} minutes, {call.questionMinutes} of them for
              questions.
              {call.until && <> Open until {deadlineWords(call.until, call.timeZone)}.</>}
            </p>
            {call.open ? (
              <SubmitForm event={event} />
            ) : (
              <EmptyState
                title="The call for abstracts is closed."
                fact={call.until ? `It ended ${deadlineWords(call.until, call.timeZone)}.` : undefined}
                action={<Link to={`/events/${event}`}>Open the event’s page</Link>}
              />
            )}
          </>
        )}
      </QueryView>
    </div>
  );
}

function SubmitForm({ event }: { event: string }) {
  const account = useAccount();
  const navigate = useNavigate();
  const [value, setValue] = useKeptDraft(`analemma-submission:${event}`);
  const submit = useSubmitTalk(event);
  const { problems, marks } = useAbstractProblems(value.abstract);
  const errors = fieldErrors(submit.error);
  const set = (part: Partial<AbstractInput>) => setValue({ ...value, ...part });
  const send = (happening: FormEvent) => {
    happening.preventDefault();
    submit.mutate(value, {
      onSuccess: (talk) => {
        setValue(emptyAbstract);
        void navigate(`/events/${event}/my-talks/${talk.id}`);
      },
    });
  };
  const authors = [
    { name: account?.printedName ?? '', affiliation: account?.affiliation ?? '' },
    ...value.coAuthors,
  ];
  return (
    <form noValidate onSubmit={send} className="grid gap-6">
      <Input
        label="Title, LaTeX"
        value={value.title}
        maxLength={300}
        error={errors.title}
        onChange={(e) => set({ title: e.target.value })}
      />
      <CoAuthors coAuthors={value.coAuthors} onChange={(coAuthors) => set({ coAuthors })} />
      <div className="grid gap-6 lg:grid-cols-2">
        <AbstractSource
          value={value.abstract}
          marks={marks}
          problems={problems}
          error={errors.abstract}
          onChange={(abstract) => set({ abstract })}
        />
        <PreviewPane {...value} authors={authors} />
        <SubjectsField codes={value.msc} error={errors.msc} onChange={(msc) => set({ msc })} />
        <ReferencesField references={value.references} onChange={(references) => set({ references })} />
      </div>
      <NeedsList needs={value.needs} onChange={(needs) => set({ needs })} />
      {submit.error && (
        <p role="alert" className="font-semibold text-alarm">
          Not submitted. {sentenceOf(submit.error)}
        </p>
      )}
      <div className="flex flex-wrap items-center gap-3">
        <Button type="submit" variant="primary" sizing="form" busy={submit.isPending}>
          Submit the talk
        </Button>
        <span className="text-ink3">
          What you type is kept in this browser until you submit. The committee decides; you hear by mail.
        </span>
      </div>
    </form>
  );
}

/** A draft that survives closing the page, in this browser only. */
function useKeptDraft(key: string): [AbstractInput, (value: AbstractInput) => void] {
  const [value, setValue] = useState<AbstractInput>(() => {
    const draft = abstractInput.extend({ title: abstractInput.shape.abstract }).safeParse(read(key));
    return draft.success ? draft.data : emptyAbstract;
  });
  useEffect(() => {
    if (JSON.stringify(value) === JSON.stringify(emptyAbstract)) localStorage.removeItem(key);
    else localStorage.setItem(key, JSON.stringify(value));
  }, [key, value]);
  return [value, setValue];
}

function read(key: string): unknown {
  try {
    return JSON.parse(localStorage.getItem(key) ?? 'null');
  } catch {
    return null;
  }
}
