import { dayName, clockSpan } from '@shared/features/programme/timetable/words';
import { endOf } from '@shared/features/programme/timetable/problem';
import { groupBy } from '@shared/features/programme/timetable/problem-index';
import type { TalkCard } from '@shared/features/programme/programme.contract';
import { Button } from '@/components/button';
import { KindTag } from '@/components/kind-tag';
import { Sign } from '@/components/sign';
import { EmptyState } from '@/components/states';
import { plainTitle } from './plain-title';
import { speakersOf } from './tile';
import { roomOf, type Composer, type Laid } from './use-composer';

/** The same talks as a table, day by day, with the same keys. On a phone it is the only view, with the tray on top. */
export function ListView({ composer, withTray }: { composer: Composer; withTray: boolean }) {
  const { draft, at, laid, problem } = composer;
  const waiting = draft.cards.filter((card) => !at.has(card.talkId));
  const order = new Map(problem.rooms.map((room, i) => [room.id, i]));
  const sorted = [...laid].sort(
    (a, b) => a.day - b.day || a.start - b.start || (order.get(a.room) ?? 0) - (order.get(b.room) ?? 0),
  );
  if (draft.cards.length === 0) {
    return (
      <div className="px-6">
        <EmptyState
          title="There are no talks yet."
          fact="Invite a speaker under Talks; accepted talks appear here to be placed."
        />
      </div>
    );
  }
  return (
    <div className="px-6 py-4 max-sm:px-4 [&_td]:align-middle">
      {withTray && waiting.length > 0 && (
        <section aria-label="To be placed" className="mb-6">
          <h2 className="mb-1.5 font-semibold">
            To be placed <span className="font-normal text-ink3">{waiting.length}</span>
          </h2>
          <table className="ruled text-dense">
            <tbody>
              {waiting.map((card) => (
                <Row key={card.talkId} card={card} composer={composer} />
              ))}
            </tbody>
          </table>
        </section>
      )}
      {[...groupBy(sorted, (one) => one.day)].map(([day, list]) => (
        <section key={day} aria-label={dayName(problem, day)} className="mb-6">
          <h2 className="mb-1.5 font-semibold">{dayName(problem, day)}</h2>
          <table className="ruled text-dense">
            <tbody>
              {list.map((one) => {
                const card = composer.cards.get(one.item);
                return card && <Row key={one.item} card={card} at={one} composer={composer} />;
              })}
            </tbody>
          </table>
        </section>
      ))}
    </div>
  );
}

function Row({ card, at, composer }: { card: TalkCard; at?: Laid; composer: Composer }) {
  const clashes = composer.clashes.filter((clash) => clash.items.includes(card.talkId));
  return (
    <tr data-chosen={composer.chosen === card.talkId}>
      <td className="w-[96px] whitespace-nowrap max-sm:w-[84px]">
        {at ? clockSpan(at.start, endOf(at)) : <span className="text-ink3">{card.minutes} min</span>}
      </td>
      <td className="w-[120px] max-sm:hidden">
        {at ? roomOf(composer.problem, at.room) : <span className="text-ink3">·</span>}
      </td>
      <td className="w-[150px] max-sm:hidden">
        <KindTag kind={card.kind} label={card.word} />
      </td>
      <td>
        <button
          type="button"
          data-talk={card.talkId}
          onClick={() => composer.choose(card.talkId)}
          aria-pressed={composer.chosen === card.talkId}
          className="min-h-[24px] text-left max-sm:min-h-[44px]"
        >
          <span className="sm:hidden">
            <KindTag kind={card.kind} label={card.word} /> {at && `${roomOf(composer.problem, at.room)}. `}
          </span>
          <span className="font-serif text-[13px]">{plainTitle(card.title) || 'No title yet'}</span>{' '}
          <span className="text-ink3">{speakersOf(card, true)}</span>
          {at?.fixed && <span className="text-ink3"> · fixed</span>}
        </button>
        {clashes.map((clash) => (
          <p key={clash.rule + clash.items.join()} className="flex gap-1.5">
            <Sign kind="must" label="Clash:" /> {clash.sentence}
          </p>
        ))}
      </td>
      <td className="num w-[72px]">
        {composer.draft.can.change && !at?.fixed && (
          <Button
            variant="link"
            onClick={() => composer.askWhere(card.talkId)}
            aria-label={`Move ${card.word}, ${plainTitle(card.title)}`}
          >
            {at ? 'Move' : 'Place'}
          </Button>
        )}
      </td>
    </tr>
  );
}
