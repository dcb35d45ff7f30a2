import { useState } from 'react';
import type { Comparison, ProgrammeChange, Spot } from '@shared/features/programme/programme.contract';
import { clock } from '@shared/features/programme/timetable/words';
import { formatDate } from '@shared/lib/time';
import { Button } from '@/components/button';
import { KindTag } from '@/components/kind-tag';

const shownAtOnce = 6;

/** What moved: where it was, where it is (what differs in bold), and how many people it concerns. */
export function ChangesTable({ comparison, from, to }: { comparison: Comparison; from: string; to: string }) {
  const [all, setAll] = useState(false);
  const { changes } = comparison;
  const shown = all ? changes : changes.slice(0, shownAtOnce);
  if (changes.length === 0) return <p className="font-serif text-[16px] leading-5">Nothing has changed.</p>;
  return (
    <div className="overflow-x-auto">
      <table className="ruled text-dense">
        <caption className="sr-only">
          Changes between {from} and {to}
        </caption>
        <thead>
          <tr>
            <th scope="col">Talk</th>
            <th scope="col">{from}</th>
            <th scope="col">{to}</th>
            <th scope="col" className="num">
              Concerns
            </th>
          </tr>
        </thead>
        <tbody>
          {shown.map((change) => (
            <ChangeRow key={change.talkId} change={change} />
          ))}
        </tbody>
      </table>
      {changes.length > shown.length && (
        <Button variant="link" onClick={() => setAll(true)}>
          {changes.length - shown.length} more changes
        </Button>
      )}
    </div>
  );
}

function ChangeRow({ change }: { change: ProgrammeChange }) {
  const people = [...new Set(change.affected.map((person) => person.shortName))];
  return (
    <tr>
      <td>
        <KindTag kind={change.kind} label={change.word} />{' '}
        {change.kind === 'course_lecture' || change.kind === 'exercise' ? '' : people[0]}
      </td>
      <td className="text-ink2">
        {change.before ? <Where spot={change.before} /> : <span className="text-ink3">not placed</span>}
      </td>
      <td>
        {change.after ? (
          <Where spot={change.after} than={change.before} />
        ) : (
          <strong className="font-semibold">taken off</strong>
        )}
        {change.what === 'people' && <span className="text-ink2"> · other people</span>}
        {change.what === 'length' && <span className="text-ink2"> · {change.after?.minutes} min</span>}
      </td>
      <td className="num" title={people.join(', ')}>
        {people.length}
      </td>
    </tr>
  );
}

/** `Wed 10:20, Great Hall`; what differs from the other place stands in bold. */
function Where({ spot, than }: { spot: Spot; than?: Spot | null }) {
  const time = `${formatDate(spot.day, { short: true })} ${clock(spot.startMinute)}`;
  const newTime =
    than !== undefined && (!than || than.day !== spot.day || than.startMinute !== spot.startMinute);
  const newRoom = than !== undefined && (!than || than.roomId !== spot.roomId);
  return (
    <>
      <span className={newTime ? 'font-semibold' : ''}>{time}</span>,{' '}
      <span className={newRoom ? 'font-semibold' : ''}>{spot.roomName}</span>
    </>
  );
}
