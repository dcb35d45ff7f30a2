import { Link } from 'react-router-dom';
import type { PublicTalk } from '@shared/features/programme/programme.contract';
import { formatTime, instantToLocal } from '@shared/lib/time';
import { KindTag } from '@/components/kind-tag';
import { MathLine } from '@/components/math-text';

const names = (talk: PublicTalk): string =>
  talk.people
    .filter((person) => person.part !== 'chair')
    .map((person) => person.printedName)
    .join(', ');

/** The talks of one day, one line each; times in `zone`. */
export function DayProgramme({
  slug,
  talks,
  zone,
  label,
}: {
  slug: string;
  talks: readonly PublicTalk[];
  zone: string;
  label: string;
}) {
  const rooms = new Set(talks.map((talk) => talk.roomId)).size;
  return (
    <table className="ruled text-form" aria-label={label}>
      <thead className="sr-only">
        <tr>
          <th>Time</th>
          <th>Kind</th>
          <th>Title</th>
          <th>By</th>
        </tr>
      </thead>
      <tbody>
        {talks.map((talk) => (
          <tr
            key={talk.talkId}
            className="max-md:flex max-md:flex-wrap max-md:border-b max-md:border-rule max-md:py-2 max-md:[&>td]:border-0 max-md:[&>td]:py-0.5"
          >
            <td className="w-16 text-[14px] font-semibold whitespace-nowrap">
              {formatTime(instantToLocal(talk.startsAt, zone).time)}
            </td>
            <td className="w-36 text-[14px]">
              <KindTag kind={talk.kind} label={talk.word} />
            </td>
            <td className="font-serif text-[16px] max-md:w-full">
              <Link className="quiet" to={`/events/${slug}/talks/${talk.talkId}`}>
                <MathLine source={talk.title || talk.word} />
              </Link>
              {rooms > 1 && (
                <span className="ml-2 font-sans text-ui whitespace-nowrap text-ink3">{talk.roomName}</span>
              )}
            </td>
            <td className="pr-0 text-right text-[14px] text-ink2 max-md:w-full max-md:text-left">
              {names(talk)}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}
