import { useEffect, useRef, useState } from 'react';
import { awardStateNames, formatGrant, stageNames } from '@shared/features/grants/grants.rules';
import type { CostKind } from '@shared/features/grants/grants.contract';
import type { FunderAward, FunderView } from '@shared/features/grants/grants-funder.contract';
import { Button } from '@/components/button';
import { Input } from '@/components/field';
import { Sign } from '@/components/sign';
import { toast } from '@/components/toast';
import { fieldErrors, sayFailure } from '@/lib/problem';
import { useDecideAward } from './grants.queries';
import { MoneyCell } from './money-cell';

/** One award: its figures, the decision, and the question written in the row. */
export function FunderRow({
  award,
  fund,
  kinds,
  columns,
}: {
  award: FunderAward;
  fund: FunderView;
  kinds: readonly CostKind[];
  columns: number;
}) {
  const [asking, setAsking] = useState(false);
  const decide = useDecideAward(fund.id);
  const go = (decision: 'approved' | 'proposed', done: string) =>
    decide.mutate({ award, decision, question: '' }, { onSuccess: () => toast(done), onError: sayFailure });
  const open = asking || award.state === 'queried';
  return (
    <>
      <tr className={open ? 'bg-cautionwash' : ''} style={{ height: 38 }}>
        <th scope="row" className="!font-normal">
          {award.reference}
        </th>
        <td>{stageNames[award.stage]}</td>
        <td>{award.region}</td>
        {fund.showScores && <td className="num">{award.score?.toFixed(1) ?? '·'}</td>}
        {kinds.map((kind) => (
          <td key={kind} className="num">
            <MoneyCell lines={award.requested} kind={kind} currency={fund.currency} />
          </td>
        ))}
        <td className="num">{formatGrant(award.requestedMinor, fund.currency, false)}</td>
        <td className="num font-semibold">{formatGrant(award.awardMinor, fund.currency, false)}</td>
        <td className="!pl-6 whitespace-nowrap">
          <Decision
            award={award}
            busy={decide.isPending}
            onApprove={() => go('approved', `${award.reference} approved.`)}
            onAsk={() => setAsking(true)}
            onUndo={() => go('proposed', `${award.reference} is open again.`)}
            asking={asking}
          />
        </td>
      </tr>
      {(open || award.talk.length > 0) && (
        <tr className={open ? 'bg-cautionwash' : ''}>
          <td />
          <td colSpan={columns - 1} className="pb-3 whitespace-normal">
            {award.talk.map((line, index) => (
              <p key={index} className="max-w-[72ch]">
                <b>{line.from === 'funder' ? 'You asked' : 'The committee answers'}:</b> {line.text}
              </p>
            ))}
            {asking && <Question award={award} fund={fund} onDone={() => setAsking(false)} />}
          </td>
        </tr>
      )}
    </>
  );
}

function Decision({
  award,
  busy,
  onApprove,
  onAsk,
  onUndo,
  asking,
}: {
  award: FunderAward;
  busy: boolean;
  onApprove: () => void;
  onAsk: () => void;
  onUndo: () => void;
  asking: boolean;
}) {
  const name = ` ${award.reference}`;
  if (award.state === 'proposed') {
    if (asking) return <span className="font-semibold text-caution">Question not sent</span>;
    return (
      <span className="inline-flex gap-2">
        <Button busy={busy} onClick={onApprove} aria-label={`Approve${name}`}>
          Approve
        </Button>
        <Button disabled={busy} onClick={onAsk} aria-label={`Query${name}`}>
          Query
        </Button>
      </span>
    );
  }
  const undo = award.can.undo && (
    <Button variant="link" busy={busy} onClick={onUndo} aria-label={`Undo the decision on${name}`}>
      Undo
    </Button>
  );
  if (award.state === 'queried') {
    return (
      <span className="inline-flex items-center gap-2">
        <span className="inline-flex items-center gap-1 font-semibold text-caution">
          <Sign kind="wish" />
          Query open
        </span>
        {award.can.approve && (
          <Button busy={busy} onClick={onApprove} aria-label={`Approve${name}`}>
            Approve
          </Button>
        )}
        {undo}
      </span>
    );
  }
  const good = award.state !== 'returned';
  return (
    <span className="inline-flex items-center gap-2">
      <span className={`inline-flex items-center gap-1 font-semibold ${good ? 'text-good' : 'text-ink3'}`}>
        {good && <Sign kind="good" />}
        {awardStateNames[award.state]}
      </span>
      {undo}
    </span>
  );
}

function Question({ award, fund, onDone }: { award: FunderAward; fund: FunderView; onDone: () => void }) {
  const [question, setQuestion] = useState('');
  const ask = useDecideAward(fund.id);
  const field = useRef<HTMLInputElement>(null);
  useEffect(() => field.current?.focus(), []);
  const send = () =>
    ask.mutate(
      { award, decision: 'queried', question },
      {
        onSuccess: () => {
          toast(`Your question on ${award.reference} is sent.`);
          onDone();
        },
        onError: (error) => !fieldErrors(error).question && sayFailure(error),
      },
    );
  return (
    <form
      className="mt-1 grid gap-2"
      onSubmit={(event) => {
        event.preventDefault();
        send();
      }}
    >
      <Input
        ref={field}
        label={`Your question on ${award.reference}, sent to the organisers`}
        value={question}
        maxLength={1000}
        onChange={(event) => setQuestion(event.target.value)}
        error={fieldErrors(ask.error).question}
      />
      <div className="flex flex-wrap items-center gap-2">
        <Button type="submit" variant="primary" busy={ask.isPending}>
          Send the question
        </Button>
        <Button onClick={onDone}>Discard</Button>
        <span className="text-dense text-ink3">
          The award waits until you approve it. The others are not held up.
        </span>
      </div>
    </form>
  );
}
