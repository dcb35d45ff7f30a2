import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { useParams } from 'react-router-dom';
import type { DeskRow } from '@shared/features/registration/registration.contract';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { PageBar } from '@/components/page-bar';
import { EmptyState, QueryView } from '@/components/states';
import { toast } from '@/components/toast';
import { sayFailure } from '@/lib/problem';
import { deskQuery, useCheckIn } from './registration.queries';

/** The desk: find by name or code, check in with one touch. Made for a phone in the hand. */
export function Component() {
  const { event = '' } = useParams();
  const [q, setQ] = useState('');
  const query = useQuery(deskQuery(event, q));
  const checkIn = useCheckIn(event);
  const set = (row: DeskRow, present: boolean) =>
    checkIn.mutate(
      { registration: row.id, present },
      {
        onSuccess: () =>
          toast(
            present ? `${row.printedName} is here.` : `${row.printedName}: check-in taken back.`,
            present ? { undo: () => set(row, false) } : {},
          ),
        onError: sayFailure,
      },
    );
  return (
    <>
      <PageBar
        title="Desk"
        facts={query.data && `${query.data.arrived} of ${query.data.expected} are here`}
      />
      <div className="mx-auto w-full max-w-[720px] p-6 text-form max-sm:p-4">
        <Input
          label="Name or code"
          value={q}
          onChange={(e) => setQ(e.target.value)}
          autoFocus
          autoComplete="off"
          inputMode="search"
        />
        <div className="mt-4">
          <QueryView query={query} what="the list of the desk">
            {({ items }) =>
              items.length === 0 ? (
                <EmptyState
                  title="Nobody like that."
                  fact="Searched in names, badge names and codes of everybody who has a place."
                />
              ) : (
                <ul className="border-y-[1.75px] border-ink">
                  {items.map((row) => (
                    <li
                      key={row.id}
                      className="flex min-h-[60px] items-center gap-3 border-b border-rule py-2 last:border-b-0"
                    >
                      <div className="min-w-0 grow">
                        <b className="font-semibold">{row.badgeName}</b>
                        {row.badgeName !== row.printedName && (
                          <span className="text-ink2"> ({row.printedName})</span>
                        )}
                        <span className="block text-ui text-ink3">
                          {row.affiliation} · <span className="font-mono">{row.code}</span>
                        </span>
                      </div>
                      {row.checkedInAt ? (
                        <span className="flex items-center gap-3">
                          <span className="font-semibold text-good">✓ here</span>
                          <Button
                            variant="link"
                            onClick={() => set(row, false)}
                            aria-label={`Take back the check-in of ${row.printedName}`}
                          >
                            Take back
                          </Button>
                        </span>
                      ) : row.paid ? (
                        <Button
                          sizing="form"
                          onClick={() => set(row, true)}
                          aria-label={`Check in ${row.printedName}`}
                        >
                          Check in
                        </Button>
                      ) : (
                        <span className="text-ui font-semibold text-caution">not paid: to the office</span>
                      )}
                    </li>
                  ))}
                </ul>
              )
            }
          </QueryView>
        </div>
      </div>
    </>
  );
}
