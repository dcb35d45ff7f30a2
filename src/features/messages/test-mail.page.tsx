import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router-dom';
import type { TestMailRow } from '@shared/features/messages/messages.contract';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, QueryView } from '@/components/states';
import { ownTime } from '@/lib/format';
import { methodWords } from './message-words';
import { testMailsQuery } from './messages.queries';
import { TestMailView } from './test-mail-view';

export function Component() {
  const [search, setSearch] = useSearchParams();
  const q = search.get('q') ?? '';
  const mail = search.get('mail') ?? '';
  const query = useQuery(testMailsQuery(q));
  const set = (key: 'q' | 'mail', value: string, replace = false) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        if (value) next.set(key, value);
        else next.delete(key);
        return next;
      },
      { replace },
    );
  return (
    <>
      <PageBar
        title="Test mail"
        facts="Letters of this demonstration arrive here; none leaves this computer"
      />
      <div className="grid grid-cols-[minmax(280px,380px)_minmax(0,1fr)] max-md:grid-cols-1">
        <div
          className={`min-w-0 border-r border-rule p-4 pl-6 max-md:border-r-0 max-md:px-4 ${mail ? 'max-md:hidden' : ''}`}
        >
          <Input
            dense
            label="Find"
            hideLabel
            placeholder="Address or subject"
            value={q}
            onChange={(e) => set('q', e.target.value, true)}
          />
          <QueryView query={query} what="the test mailbox">
            {({ items }) =>
              items.length === 0 ? (
                <EmptyState
                  title={q ? 'No letter like that.' : 'No letter has come yet.'}
                  fact="Whatever the application sends appears here within seconds."
                />
              ) : (
                <Letters items={items} chosen={mail} onOpen={(id) => set('mail', id)} />
              )
            }
          </QueryView>
        </div>
        <section aria-label="Letter" className={`min-w-0 p-6 max-md:p-4 ${mail ? '' : 'max-md:hidden'}`}>
          {mail ? (
            <>
              <Button className="mb-4 md:hidden" onClick={() => set('mail', '')}>
                Back to the letters
              </Button>
              <TestMailView key={mail} id={mail} />
            </>
          ) : (
            <p className="text-ink3">Choose a letter to read it.</p>
          )}
        </section>
      </div>
    </>
  );
}

function Letters({
  items,
  chosen,
  onOpen,
}: {
  items: TestMailRow[];
  chosen: string;
  onOpen: (id: string) => void;
}) {
  return (
    <ul className="mt-3 border-t border-ink">
      {items.map((item) => (
        <li key={item.id} className="border-b border-rule">
          <button
            type="button"
            aria-current={item.id === chosen ? 'true' : undefined}
            onClick={() => onOpen(item.id)}
            className={`grid w-full grid-cols-[minmax(0,1fr)] gap-0.5 py-2 pr-2 pl-2 text-left hover:bg-wash ${item.id === chosen ? 'border-l-[3px] border-ink bg-wash' : ''}`}
          >
            <span className="flex justify-between gap-3 text-dense text-ink3">
              <span className="min-w-0 truncate">{item.to}</span>
              <span className="whitespace-nowrap">{ownTime(item.at)}</span>
            </span>
            <span className="break-words">{item.subject}</span>
            {item.calendarMethod && (
              <span className="text-dense text-ink2">
                with calendar part: {(methodWords[item.calendarMethod] ?? item.calendarMethod).toLowerCase()}
              </span>
            )}
          </button>
        </li>
      ))}
    </ul>
  );
}
