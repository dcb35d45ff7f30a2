import { describe, expect, it } from 'vitest';
import type { PublicEventSummary } from '../../../shared/features/site/site.contract';
import { bySeason, dayToShow, feeRule } from '../../../shared/features/site/site.rules';
import { scriptSafeJson } from '../../../server/features/site/site-data.presenter';
import { latexLine, latexText } from '../../../server/features/site/site-html.presenter';
import { fillPage } from '../../../server/features/site/site-html.service';

const categories = [
  { earlyMinor: 15_000, earlyUntil: '2026-04-30', regularMinor: 21_000 },
  { earlyMinor: 24_000, earlyUntil: '2026-04-30', regularMinor: 33_000 },
];
const facts = { categories, currency: 'EUR', town: 'Tarnholt', today: '2026-04-28', capacity: 140, free: 8 };

describe('the fee rule', () => {
  it('says until when the early fee is, both fees, and the places when few are left', () => {
    expect(feeRule(facts)).toEqual([
      'Early fee until Thu 30 April, 23:59 Tarnholt time',
      '150.00 to 240.00 EUR; from 1 May 210.00 to 330.00 EUR.',
      '8 places of 140 left.',
    ]);
  });
  it('on the last early day still the early fee, the day after the regular one', () => {
    expect(feeRule({ ...facts, today: '2026-04-30' })[1]).toContain('150.00 to 240.00 EUR;');
    expect(feeRule({ ...facts, today: '2026-05-01' })).toEqual([
      'Fee 210.00 to 330.00 EUR',
      '8 places of 140 left.',
    ]);
  });
  it('one place, no place, no fee, no table', () => {
    expect(feeRule({ ...facts, free: 1 })[2]).toBe('1 place of 140 left.');
    expect(feeRule({ ...facts, free: 0 })[2]).toBe('All 140 places are taken.');
    expect(
      feeRule({ ...facts, free: 140, categories: [{ earlyMinor: null, earlyUntil: null, regularMinor: 0 }] }),
    ).toEqual(['There is no fee', '140 places.']);
    expect(feeRule({ ...facts, free: 140, categories: [] })).toEqual(['140 places.']);
  });
});

describe('order and day', () => {
  const event = (state: PublicEventSummary['state'], startsOn: string) =>
    ({ state, startsOn }) as PublicEventSummary;
  it('running, then coming by date, then past, the latest first', () => {
    const events = [
      event('finished', '2026-01-01'),
      event('open', '2026-09-01'),
      event('archived', '2025-01-01'),
      event('announced', '2026-08-01'),
      event('running', '2026-06-01'),
      event('finished', '2026-03-01'),
    ];
    expect(events.sort(bySeason).map((one) => one.startsOn)).toEqual([
      '2026-06-01',
      '2026-08-01',
      '2026-09-01',
      '2026-03-01',
      '2026-01-01',
      '2025-01-01',
    ]);
  });
  it('shows today, else the fullest day to come, else the fullest', () => {
    const talks = ['2026-07-06', '2026-07-07', '2026-07-07', '2026-07-08'].map((day) => ({ day }));
    expect(dayToShow(talks, '2026-07-06')).toBe('2026-07-06');
    expect(dayToShow(talks, '2026-07-01')).toBe('2026-07-07');
    expect(dayToShow(talks, '2026-08-01')).toBe('2026-07-07');
    expect(dayToShow([], '2026-07-06')).toBeNull();
  });
});

describe('text of others in the page', () => {
  const hostile = '</script><script>alert(1)</script><!-- & \u2028 "quoted"';
  it('JSON in a script element can’t end it, and reads back as it was', () => {
    const json = scriptSafeJson({ name: hostile });
    expect(json).not.toMatch(/[<>&\u2028]/);
    expect(JSON.parse(json)).toEqual({ name: hostile });
  });
  it('LaTeX becomes text and MathML; markup stays text', () => {
    expect(latexLine('The group $H^1(\\Omega)$')).toContain('<math');
    expect(latexText('<img src=x onerror=alert(1)> and $\\href{javascript:alert(1)}{x}$')).not.toMatch(
      /<img|href=|javascript:[^<]*"/,
    );
  });
  it('title and description are escaped, replacement patterns stay as they are', () => {
    const index = '<head><title>Analemma</title></head><div id="root"><!--page--></div>';
    const page = fillPage(index, {
      status: 200,
      title: hostile,
      description: '" onload="x $& $1',
      html: '<p>$&</p>',
      head: '',
    });
    expect(page).not.toContain('<script>alert');
    expect(page).toContain('content="&#34; onload=&#34;x $&#38; $1"');
    expect(page).toContain('<p>$&</p>');
    expect(page).not.toContain('<!--page-->');
  });
});
