import { render, screen, within } from '@testing-library/react';
import { MemoryRouter } from 'react-router-dom';
import { describe, expect, it } from 'vitest';
import { RunUpLine, type RunUpMark } from '@/components/run-up-line';

const mark = (date: string, label: string, own = false): RunUpMark => ({
  date,
  label,
  own,
  href: `/${label}`,
});

function draw(today: string, marks: RunUpMark[]): void {
  const event = { startsOn: '2020-07-06', endsOn: '2020-07-17', label: 'Summer school', href: '/event' };
  render(
    <MemoryRouter>
      <RunUpLine
        from="2019-11-24"
        to="2020-09-21"
        today={today}
        event={event}
        marks={marks}
        sentence="Today."
      />
    </MemoryRouter>,
  );
}

/** The visible labels are the links outside the list of marks. */
const labels = (): string[] => {
  const list = screen.getByRole('list');
  return screen
    .getAllByRole('link')
    .filter((link) => !list.contains(link))
    .map((link) => link.textContent ?? '');
};

describe('the run-up line', () => {
  it('names each mark with its date and its distance from today', () => {
    draw('2020-04-28', [
      mark('2020-04-30', 'Awards decided'),
      mark('2020-04-28', 'Abstracts due'),
      mark('2020-04-27', 'Forms close'),
    ]);
    const items = within(screen.getByRole('list')).getAllByRole('listitem');
    expect(items.map((item) => within(item).getByRole('link').getAttribute('aria-label'))).toEqual([
      '30 April: Awards decided, in 2 days',
      '28 April: Abstracts due, today',
      '27 April: Forms close, 1 day ago',
    ]);
  });

  // The computer's clock is after both: only the given today can tell them apart.
  it.each([
    ['2020-04-28', true],
    ['2020-01-10', false],
  ])('ticks a label by the today it is given: %s', (today, ticked) => {
    draw(today, [mark('2020-02-15', 'Applications close', true)]);
    expect(
      labels()
        .find((text) => text.includes('Applications close'))
        ?.includes('✓'),
    ).toBe(ticked);
  });

  it('leaves a colliding label out: own beats other, earlier beats later', () => {
    draw('2020-01-10', [
      mark('2020-03-02', 'Later own', true),
      mark('2020-03-01', 'Earlier own', true),
      mark('2020-07-07', 'Not own, last'),
    ]);
    expect(labels().map((text) => text.replace(/^\d+ \w+ /, ''))).toEqual(['Earlier own', 'Summer school']);
  });
});
