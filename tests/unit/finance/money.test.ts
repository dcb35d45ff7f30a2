import currencyCodes from 'currency-codes';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  add,
  allocate,
  divideRounded,
  exponentOf,
  formatMoney,
  fromStripeAmount,
  money,
  parseMinor,
  stripeAmount,
} from '../../../shared/lib/money';

describe('exponents (ISO 4217, as in npm currency-codes 2.2.0)', () => {
  it.each(
    currencyCodes.data
      .filter((entry) => !/^X(?!AF|OF|PF|CD|CG)/.test(entry.code))
      .map((entry) => [entry.code, entry.digits] as const),
  )('%s has %d', (code, digits) => {
    expect(exponentOf(code)).toBe(digits);
  });
});

describe('reading and writing amounts', () => {
  it.each([
    ['12.50', 'EUR', 1250, '12.50 EUR'],
    ['0.05', 'EUR', 5, '0.05 EUR'],
    ['1,240', 'EUR', 124_000, '1,240.00 EUR'],
    ['500', 'JPY', 500, '500 JPY'],
    ['5.120', 'KWD', 5120, '5.120 KWD'],
    ['-3', 'KWD', -3000, '−3.000 KWD'],
  ] as const)('%s %s', (text, currency, minor, written) => {
    expect(parseMinor(text, currency)).toBe(minor);
    expect(formatMoney(minor, currency)).toBe(written);
  });
  it.each([
    ['12.505', 'EUR'],
    ['1.5', 'JPY'],
    ['5.1234', 'KWD'],
    ['', 'EUR'],
    ['12,50', 'EUR'],
    ['1e3', 'EUR'],
    ['12.', 'EUR'],
  ] as const)('refuses %j in %s', (text, currency) => {
    expect(parseMinor(text, currency)).toBeUndefined();
  });
  it('reads back what it writes', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 10 ** 11 }),
        fc.constantFrom('EUR', 'JPY', 'KWD'),
        (minor, currency) => parseMinor(formatMoney(minor, currency, false), currency) === minor,
      ),
    );
  });
});

describe('arithmetic', () => {
  it('refuses two currencies at run time, and the compiler does, too', () => {
    // @ts-expect-error two currencies
    expect(() => add(money(1, 'EUR'), money(1, 'JPY'))).toThrow(TypeError);
    expect(add(money(1, 'EUR'), money(2, 'EUR'))).toEqual({ amountMinor: 3, currency: 'EUR' });
    expect(() => money(0.5, 'EUR')).toThrow(RangeError);
  });
  // Half away from zero; 2.5 -> 3 is the case 0.50 at 5 % of EN 16931 (half up, BR-CO-17).
  it.each([
    [5, 2, 3],
    [-5, 2, -3],
    [4, 3, 1],
    [1, 3, 0],
    [2, 3, 1],
    [250, 100, 3],
    [0, 7, 0],
  ])('%d / %d is %d', (a, b, quotient) => expect(divideRounded(a, b)).toBe(quotient));
  it('allocates without loss, each part within one unit of its share', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: -(10 ** 9), max: 10 ** 9 }),
        fc.array(fc.integer({ min: 0, max: 1000 }), { minLength: 1, maxLength: 20 }),
        (amount, weights) => {
          fc.pre(weights.some((weight) => weight > 0));
          const parts = allocate(amount, weights);
          const total = weights.reduce((sum, weight) => sum + weight, 0);
          expect(parts.reduce((sum, part) => sum + part, 0)).toBe(amount);
          parts.forEach((part, index) =>
            expect(Math.abs(part - (amount * (weights[index] as number)) / total)).toBeLessThan(1.001),
          );
        },
      ),
    );
    expect(allocate(100, [1, 1, 1])).toEqual([34, 33, 33]);
  });
});

// docs.stripe.com/currencies: display amount -> what is sent.
describe('amounts for Stripe', () => {
  it.each([
    [1000, 'USD', 1000],
    [500, 'JPY', 500],
    [5, 'ISK', 500],
    [5120, 'KWD', 5120],
    [25_000, 'EUR', 25_000],
    [1200, 'MGA', 12],
  ] as const)('%d minor units of %s are sent as %d', (minor, currency, sent) => {
    expect(stripeAmount(minor, currency)).toBe(sent);
    expect(fromStripeAmount(sent, currency)).toBe(minor);
  });
  it.each([
    [5124, 'KWD'],
    [150, 'MGA'],
    [100, 'UGX'],
    [10_000, 'CLF'],
  ] as const)('refuses %d %s', (minor, currency) =>
    expect(() => stripeAmount(minor, currency)).toThrow(RangeError),
  );
});
