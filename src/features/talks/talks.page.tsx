import { useState } from 'react';
import { useParams, useSearchParams } from 'react-router-dom';
import { count } from '@shared/lib/text';
import { Button } from '@/components/button';
import { Segmented } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { CoursesView } from './courses-view';
import { InviteDialog } from './invite-dialog';
import { TalkDialog } from './talk-dialog';
import { TalkRecord } from './talk-record';
import { TalksList } from './talks-list';
import { useRemind } from './talks.queries';

/** Talks of an event: the list left, the chosen talk right; filters and choice are in the address. */
export function Component() {
  const { event = '' } = useParams();
  const [params, setParams] = useSearchParams();
  const [dialog, setDialog] = useState<'invite' | 'add'>();
  const view = params.get('view') === 'courses' ? 'courses' : 'talks';
  const chosen = params.get('talk') ?? undefined;
  const choose = (talk: string | undefined) =>
    setParams((old) => {
      if (talk) old.set('talk', talk);
      else old.delete('talk');
      return old;
    });
  return (
    <>
      <PageBar
        title="Talks"
        controls={
          <Segmented
            label="View"
            value={view}
            onChange={(next) => setParams(next === 'courses' ? { view: 'courses' } : {})}
            options={[
              { value: 'talks', label: 'Talks' },
              { value: 'courses', label: 'Lecture courses' },
            ]}
          />
        }
        actions={
          <>
            <Remind event={event} />
            <Button onClick={() => setDialog('add')}>Add a talk …</Button>
            <Button variant="primary" onClick={() => setDialog('invite')}>
              Invite a speaker …
            </Button>
          </>
        }
      />
      {view === 'courses' ? (
        <CoursesView event={event} />
      ) : (
        <div className="grid grow grid-cols-[minmax(0,1fr)_420px] max-lg:grid-cols-1">
          <div className={`min-w-0 p-6 max-sm:p-4 ${chosen ? 'max-lg:hidden' : ''}`}>
            <TalksList
              event={event}
              params={params}
              setParams={setParams}
              chosen={chosen}
              onChoose={choose}
            />
          </div>
          <aside
            aria-label="The chosen talk"
            className={`min-w-0 border-l border-rule bg-paper p-6 max-lg:border-l-0 max-sm:p-4 ${chosen ? '' : 'max-lg:hidden'}`}
          >
            {chosen ? (
              <TalkRecord key={chosen} event={event} talkId={chosen} onClose={() => choose(undefined)} />
            ) : (
              <p className="font-serif text-[18px] text-ink3">Choose a talk to see its abstract and files.</p>
            )}
          </aside>
        </div>
      )}
      {dialog === 'invite' && (
        <InviteDialog event={event} onClose={() => setDialog(undefined)} onDone={choose} />
      )}
      {dialog === 'add' && <TalkDialog event={event} onClose={() => setDialog(undefined)} onDone={choose} />}
    </>
  );
}

function Remind({ event }: { event: string }) {
  const remind = useRemind(event);
  const run = () =>
    remind.mutate(undefined, {
      onSuccess: ({ written }) =>
        toast(
          written === 0
            ? 'Nobody owes an abstract.'
            : `${count(written, 'abstract')} owed. Each speaker gets at most one letter a day about it.`,
        ),
      onError: sayFailure,
    });
  return (
    <Button busy={remind.isPending} onClick={run}>
      Remind who owes an abstract
    </Button>
  );
}
