import { useQuery } from '@tanstack/react-query';
import { downloadEvidence } from '@shared/features/grants/grants.contract';
import type { GrantBoard, GrantDetail } from '@shared/features/grants/grants-committee.contract';
import { costKindNames, flagNames, formatGrant, stageNames } from '@shared/features/grants/grants.rules';
import { Button } from '@/components/button';
import { Facts, SectionHead } from '@/components/page-bar';
import { QueryView } from '@/components/states';
import { fileAddress } from '@/lib/api';
import { formatBytes } from '@/lib/format';
import { AwardForm } from './award-form';
import { grantQuery } from './grants.queries';
import { QueryAnswer } from './query-answer';
import { ScoreForm } from './score-form';

/** The chosen application: what is asked and why, scores, awards by fund. */
export function GrantPanel({
  event,
  board,
  application,
  onClose,
}: {
  event: string;
  board: GrantBoard;
  application: string;
  onClose: () => void;
}) {
  const query = useQuery(grantQuery(event, application));
  return (
    <section aria-label="Application" className="mb-6 border-b-[1.75px] border-ink pb-5">
      <QueryView query={query} what="the application">
        {(detail) => (
          <div className="grid gap-4">
            <div>
              <div className="flex items-start justify-between gap-3">
                <h2 className="font-serif text-[18px] leading-6">{detail.row.person?.printedName}</h2>
                <Button onClick={onClose} aria-label="Close the application">
                  Close
                </Button>
              </div>
              <p className="text-ink3">{detail.row.person?.affiliation}</p>
            </div>
            <Particulars detail={detail} board={board} event={event} />
            <Scores detail={detail} event={event} />
            {detail.can.propose && <Awards detail={detail} board={board} event={event} />}
          </div>
        )}
      </QueryView>
    </section>
  );
}

function Particulars({ detail, board, event }: { detail: GrantDetail; board: GrantBoard; event: string }) {
  const { row, items } = detail;
  const money = (amount: number) => formatGrant(amount, board.currency);
  return (
    <>
      <Facts
        items={[
          ['Reference', row.reference],
          ['Stage', row.person && stageNames[row.person.stage]],
          ['From', row.person?.country ?? 'not stated'],
          detail.talkTitle !== null && ['Talk', detail.talkTitle],
          detail.flags.length > 0 && ['Says', detail.flags.map((flag) => flagNames[flag]).join('; ')],
          ...items
            .filter((item) => item.amountMinor > 0)
            .map((item): [string, React.ReactNode] => [
              costKindNames[item.kind],
              <span key={item.kind}>
                {money(item.amountMinor)}
                {item.quantity !== null && (
                  <span className="text-ink3">
                    {' '}
                    · {item.quantity} {item.kind === 'accommodation' ? 'nights' : 'days'}
                  </span>
                )}
                {item.note && <span className="block text-ink3">{item.note}</span>}
              </span>,
            ]),
          ['Together', <b key="sum">{money(row.requestedMinor)}</b>],
          detail.minUsefulMinor > 0 && ['Can come with', `${money(detail.minUsefulMinor)} or more`],
        ]}
      />
      <p className="font-serif text-[15px] leading-[22px] whitespace-pre-wrap">{detail.motivation}</p>
      {detail.evidence.length > 0 && (
        <ul>
          {detail.evidence.map((file) => (
            <li key={file.id}>
              <a
                href={fileAddress(downloadEvidence, { event, evidence: file.id })}
                target="_blank"
                rel="noreferrer"
              >
                {file.fileName}
              </a>{' '}
              <span className="text-ink3">
                {costKindNames[file.kind]}, {formatBytes(file.bytes)}
              </span>
            </li>
          ))}
        </ul>
      )}
    </>
  );
}

function Scores({ detail, event }: { detail: GrantDetail; event: string }) {
  return (
    <div>
      <SectionHead
        level={3}
        title="Scores"
        aside={
          detail.row.score === null ? `${detail.row.scores} given` : `mean ${detail.row.score.toFixed(1)}`
        }
      />
      {detail.reviews?.map((review, index) => (
        <p key={index} className="text-dense">
          <b>{review.score}</b> {review.reviewer}
          {review.comment && <span className="text-ink2">: {review.comment}</span>}
        </p>
      ))}
      {detail.reviews === null && (
        <p className="text-dense text-ink3">Scores of others show when yours is given.</p>
      )}
      {detail.can.score && <ScoreForm event={event} detail={detail} />}
    </div>
  );
}

function Awards({ detail, board, event }: { detail: GrantDetail; board: GrantBoard; event: string }) {
  return (
    <div>
      <SectionHead level={3} title="Award by fund" />
      {board.funds.length === 0 && <p className="text-dense text-ink3">Add a fund first.</p>}
      {board.funds.map((fund) => {
        const award = detail.row.awards.find((candidate) => candidate.fundId === fund.id);
        const talk = detail.talks.find((entry) => entry.awardId === award?.id)?.lines ?? [];
        return (
          <div key={fund.id} className="border-t border-rule py-2">
            <AwardForm
              key={`${award?.version ?? 'none'}`}
              event={event}
              detail={detail}
              fund={fund}
              award={award}
            />
            {talk.map((line, index) => (
              <p key={index} className="mt-1 text-dense">
                <b>{line.from === 'funder' ? 'Funder' : 'Committee'}:</b> {line.text}
              </p>
            ))}
            {award?.state === 'queried' && <QueryAnswer event={event} award={award} />}
          </div>
        );
      })}
    </div>
  );
}
