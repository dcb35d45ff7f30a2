import { useState } from 'react';
import type { EventDetail } from '@shared/features/events/events.contract';
import type { Overview } from '@shared/features/runup/runup.contract';
import { exponentOf, formatMoney } from '@shared/lib/money';
import { addDays, daysBetween, formatDate, instantToLocal } from '@shared/lib/time';
import { Button } from '@/components/button';
import { SectionHead } from '@/components/page-bar';

const W = 560;
const H = 190;

/** Money in, as it came: payments are steps, today is the sun. The numbers stand in a table one key away. */
export function Income({ money, event }: { money: Overview['money']; event: EventDetail }) {
  const [table, setTable] = useState(false);
  const today = instantToLocal(new Date(), event.timeZone).date;
  const { steps, currency } = money;
  const first = steps[0]?.on ?? today;
  const from = addDays(first < today ? first : today, -3);
  const to = event.endsOn > today ? event.endsOn : today;
  const days = Math.max(1, daysBetween(from, to));
  const top = niceTop(Math.max(1, money.receivedMinor + money.openMinor));
  const x = (date: string): number => 56 + (daysBetween(from, date) / days) * (W - 60);
  const y = (minor: number): number => H - 22 - (minor / top) * (H - 40);
  const line = `M${x(from)} ${y(0)}${steps.map((step, i) => `H${x(step.on).toFixed(1)}V${y(step.totalMinor).toFixed(1)}${i === steps.length - 1 ? `H${x(today).toFixed(1)}` : ''}`).join('')}`;
  const whole = (minor: number): string =>
    formatMoney(
      Math.round(minor / 10 ** exponentOf(currency)) * 10 ** exponentOf(currency),
      currency,
      false,
    ).replace(/\.\d+$/, '');
  const sentence = `${formatMoney(money.receivedMinor, currency)} received, ${formatMoney(money.openMinor, currency)} still open.`;
  return (
    <section>
      <SectionHead
        title="Money in"
        aside={
          <>
            {currency}; {whole(money.openMinor)} still open{' '}
            <Button variant="link" className="ml-2" aria-expanded={table} onClick={() => setTable(!table)}>
              {table ? 'As a plot' : 'As a table'}
            </Button>
          </>
        }
      />
      {table ? (
        <table className="ruled text-dense">
          <thead>
            <tr>
              <th scope="col">By the end of</th>
              <th scope="col" className="num">
                Received, {currency}
              </th>
            </tr>
          </thead>
          <tbody>
            {steps.map((step) => (
              <tr key={step.on}>
                <td>{formatDate(step.on, { year: true })}</td>
                <td className="num">{formatMoney(step.totalMinor, currency, false)}</td>
              </tr>
            ))}
          </tbody>
        </table>
      ) : steps.length === 0 ? (
        <p className="text-ink3">Nothing has come in yet.</p>
      ) : (
        <svg viewBox={`0 0 ${W} ${H}`} width="100%" role="img" aria-label={sentence}>
          {[0, 0.5, 1].map((share) => (
            <g key={share}>
              <line
                x1="56"
                x2={W}
                y1={y(top * share)}
                y2={y(top * share)}
                stroke={share === 0 ? 'var(--color-ink)' : 'var(--color-rule)'}
              />
              <text x="48" y={y(top * share) + 4} textAnchor="end" fontSize="11" fill="var(--color-ink3)">
                {whole(top * share)}
              </text>
            </g>
          ))}
          <path d={`${line}V${y(0)}Z`} fill="var(--color-wash)" />
          <path d={line} fill="none" stroke="var(--color-ink)" strokeWidth="1.75" />
          <line
            x1={x(today)}
            x2={x(today)}
            y1={y(money.receivedMinor)}
            y2={y(0)}
            stroke="var(--color-sun)"
            strokeWidth="1.5"
          />
          <circle cx={x(today)} cy={y(money.receivedMinor)} r="5" fill="var(--color-sun)" />
          <text
            x={x(today) > W * 0.7 ? x(today) - 10 : x(today) + 10}
            y={Math.max(12, y(money.receivedMinor) - 8)}
            textAnchor={x(today) > W * 0.7 ? 'end' : 'start'}
            fontSize="12"
            fontWeight="600"
            fill="var(--color-ink)"
          >
            {whole(money.receivedMinor)} received
          </text>
          <text x="56" y={H - 6} fontSize="11" fill="var(--color-ink3)">
            {formatDate(from, { weekday: false, short: true })}
          </text>
          <text x={W} y={H - 6} textAnchor="end" fontSize="11" fill="var(--color-ink3)">
            {formatDate(to, { weekday: false, short: true })}
          </text>
        </svg>
      )}
    </section>
  );
}

/** The next round number above: 1, 2 or 5 times a power of ten. */
function niceTop(value: number): number {
  const power = 10 ** Math.floor(Math.log10(value));
  return ([1, 2, 5, 10].find((factor) => factor * power >= value) ?? 10) * power;
}
