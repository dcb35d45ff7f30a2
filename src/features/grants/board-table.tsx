import { costKinds } from '@shared/features/grants/grants.contract';
import type { BoardRow, GrantBoard } from '@shared/features/grants/grants-committee.contract';
import {
  awardStateNames,
  costKindNames,
  formatGrant,
  stageNames,
} from '@shared/features/grants/grants.rules';
import { MoneyCell } from './money-cell';

const conflictWords = {
  declared: 'You declared a conflict of interest.',
  institution: 'From your own institution.',
  own: 'Your own application.',
};

/** Rank, applicant, what was asked by kind, what each fund gives; a reason in a second line. */
export function BoardTable({
  board,
  rows,
  chosen,
  onChoose,
}: {
  board: GrantBoard;
  rows: readonly BoardRow[];
  chosen?: string;
  onChoose: (id: string) => void;
}) {
  const kinds = costKinds.filter((kind) =>
    board.rows.some((row) => row.requested.some((line) => line.kind === kind)),
  );
  const { currency, funds } = board;
  const columns = 7 + kinds.length + Math.max(1, funds.length);
  return (
    <div className="overflow-x-auto" tabIndex={-1}>
      <table className="ruled row-heads text-dense whitespace-nowrap [&_:is(td,th)]:!pr-2 [&_tbody_:is(td,th)]:!py-0 [&_tbody_:is(td,th)]:align-middle [&_tbody_:is(td,th)]:h-6">
        <caption className="sr-only">Grant applications by rank; sums in {currency}</caption>
        <thead>
          <tr>
            <td colSpan={5} />
            <th scope="colgroup" colSpan={kinds.length + 1} className="!border-b !border-rule text-center">
              Requested, {currency}
            </th>
            <th
              scope="colgroup"
              colSpan={Math.max(1, funds.length)}
              className="!border-b !border-rule text-center"
            >
              Award by fund, {currency}
            </th>
            <td />
          </tr>
          <tr>
            <th scope="col" className="num">
              Rank
            </th>
            <th scope="col">Applicant</th>
            <th scope="col">From</th>
            <th scope="col">Stage</th>
            <th scope="col" className="num" aria-sort="descending">
              Score ↓
            </th>
            {kinds.map((kind) => (
              <th key={kind} scope="col" className="num">
                {costKindNames[kind]}
              </th>
            ))}
            <th scope="col" className="num">
              Request
            </th>
            {funds.map((fund) => (
              <th key={fund.id} scope="col" className="num" title={fund.name}>
                {fund.letter}
              </th>
            ))}
            {funds.length === 0 && (
              <th scope="col" className="num">
                No funds yet
              </th>
            )}
            <th scope="col" className="!pl-3">
              State
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <Row
              key={row.id}
              row={row}
              board={board}
              kinds={kinds}
              columns={columns}
              chosen={chosen === row.id}
              onChoose={onChoose}
            />
          ))}
        </tbody>
      </table>
      <p className="mt-2 text-dense whitespace-normal text-ink3">
        n.e. not eligible · <sup className="text-alarm">c</sup> cut to the fund’s cap · – not asked for · a
        score shows after you have given yours
        {board.can.propose ? '; organisers see all means once the date for applications is past' : ''}
      </p>
    </div>
  );
}

function Row({
  row,
  board,
  kinds,
  columns,
  chosen,
  onChoose,
}: {
  row: BoardRow;
  board: GrantBoard;
  kinds: readonly (typeof costKinds)[number][];
  columns: number;
  chosen: boolean;
  onChoose: (id: string) => void;
}) {
  const { currency, funds } = board;
  const { person } = row;
  if (!person) {
    return (
      <tr className="text-ink3">
        <td className="num">·</td>
        <td colSpan={columns - 1}>
          {row.reference} · {row.conflict && conflictWords[row.conflict]} The others of the committee decide.
        </td>
      </tr>
    );
  }
  return (
    <>
      <tr className={`${row.reason ? '[&>*]:!border-b-0' : ''} ${chosen ? 'bg-actwash' : ''}`}>
        <td className="num">{row.rank ?? '·'}</td>
        <th scope="row">
          <button
            type="button"
            className="min-h-[24px] max-w-[300px] truncate text-left font-semibold text-ink hover:underline"
            onClick={() => onChoose(row.id)}
          >
            {person.printedName} <span className="font-normal text-ink3">{person.affiliation}</span>
          </button>
        </th>
        <td>{person.country ?? '·'}</td>
        <td>{stageNames[person.stage]}</td>
        <td
          className="num font-semibold"
          title={row.score === null ? `${row.scores} scores given` : undefined}
        >
          {row.score?.toFixed(1) ?? '·'}
        </td>
        {kinds.map((kind) => (
          <td key={kind} className="num">
            <MoneyCell lines={row.requested} kind={kind} currency={currency} />
          </td>
        ))}
        <td className="num font-semibold">{formatGrant(row.requestedMinor, currency, false)}</td>
        {funds.map((fund) => (
          <td key={fund.id} className="num">
            <AwardCell row={row} fundId={fund.id} letter={fund.letter} currency={currency} />
          </td>
        ))}
        {funds.length === 0 && <td />}
        <td className="!pl-3">
          <States row={row} />
        </td>
      </tr>
      {row.reason && (
        <tr className={chosen ? 'bg-actwash' : ''}>
          <td />
          <td colSpan={columns - 1} className="!pb-1 whitespace-normal">
            <b className="text-alarm">Not funded.</b> {row.reason}
          </td>
        </tr>
      )}
    </>
  );
}

function AwardCell({
  row,
  fundId,
  letter,
  currency,
}: {
  row: BoardRow;
  fundId: string;
  letter: string;
  currency: string;
}) {
  const award = row.awards.find((candidate) => candidate.fundId === fundId);
  if (!award)
    return row.notEligible.includes(letter) ? (
      <abbr title="not eligible" className="text-ink3 no-underline">
        n.e.
      </abbr>
    ) : (
      <span aria-label="nothing">·</span>
    );
  return (
    <>
      <span className="font-semibold">{formatGrant(award.totalMinor, currency, false)}</span>
      {award.capped && (
        <sup className="text-alarm" aria-label="cut to the cap">
          c
        </sup>
      )}
    </>
  );
}

/** One word for all awards of a person where they agree, else each; without an award, what the letter said. */
function States({ row }: { row: BoardRow }) {
  const states = [...new Set(row.awards.map((award) => award.state))];
  if (states.length === 0)
    return (
      <span className="text-ink3">
        {row.decision === 'not_awarded' ? 'letter sent' : row.decision ? 'given back' : '·'}
      </span>
    );
  return states.map((state, index) => (
    <span key={state} className={state === 'queried' ? 'font-semibold text-caution' : 'text-ink3'}>
      {index > 0 && ', '}
      {awardStateNames[state].toLowerCase()}
    </span>
  ));
}
