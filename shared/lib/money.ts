/**
 * Money: integers in the currency's minor unit with an ISO 4217 code. Exponents that are not 2 are listed here
 * (ISO 4217 list one, amendment state of npm currency-codes 2.2.0); every other currency has 2.
 */
const EXPONENTS: Record<string, number> = Object.fromEntries([
  ...'BIF CLP DJF GNF ISK JPY KMF KRW PYG RWF UGX UYI VND VUV XAF XOF XPF'
    .split(' ')
    .map((code) => [code, 0]),
  ...'BHD IQD JOD KWD LYD OMR TND'.split(' ').map((code) => [code, 3]),
  ...'CLF UYW'.split(' ').map((code) => [code, 4]),
]);

export interface Money<C extends string = string> {
  /** Integer, in the minor unit. */
  amountMinor: number;
  /** ISO 4217. */
  currency: C;
}

/** Digits after the point. */
export const exponentOf = (currency: string): number => EXPONENTS[currency] ?? 2;

/** @throws RangeError unless the amount is a safe integer. */
export function money<C extends string>(amountMinor: number, currency: C): Money<C> {
  if (!Number.isSafeInteger(amountMinor))
    throw new RangeError(`not a whole number of minor units: ${amountMinor}`);
  return { amountMinor, currency };
}

/** @throws TypeError for two currencies (the compiler refuses them, too). */
export function add<C extends string>(a: Money<C>, b: Money<NoInfer<C>>): Money<C> {
  if (a.currency !== b.currency) throw new TypeError(`${a.currency} and ${b.currency} can't be added`);
  return money(a.amountMinor + b.amountMinor, a.currency);
}

/** A quotient rounded half away from zero to an integer; exact for safe integers. */
export function divideRounded(numerator: number, denominator: number): number {
  const n = BigInt(numerator);
  const d = BigInt(denominator);
  const sign = n < 0n === d < 0n ? 1n : -1n;
  const abs = (x: bigint): bigint => (x < 0n ? -x : x);
  return Number(sign * ((2n * abs(n) + abs(d)) / (2n * abs(d))));
}

/** `12.50` -> 1250 for EUR. Undefined when it is not an amount of that currency. */
export function parseMinor(text: string, currency: string): number | undefined {
  const exponent = exponentOf(currency);
  const match = /^(-?)(\d{1,12})(?:\.(\d+))?$/.exec(text.trim().replace(/[\s,](?=\d{3}\b)/g, ''));
  if (!match) return undefined;
  const [, sign, whole = '', fraction = ''] = match;
  if (fraction.length > exponent) return undefined;
  const amount = Number(whole + fraction.padEnd(exponent, '0'));
  return Number.isSafeInteger(amount) ? (sign ? -amount : amount) : undefined;
}

/** `1,240.00 EUR`; without the code when asked. */
export function formatMoney(amountMinor: number, currency: string, withCode = true): string {
  const exponent = exponentOf(currency);
  const digits = String(Math.abs(amountMinor)).padStart(exponent + 1, '0');
  const whole = digits.slice(0, digits.length - exponent).replace(/\B(?=(\d{3})+$)/g, ',');
  const fraction = exponent ? `.${digits.slice(-exponent)}` : '';
  return `${amountMinor < 0 ? '−' : ''}${whole}${fraction}${withCode ? ` ${currency}` : ''}`;
}

/**
 * Splits an amount by weights without loss: largest remainder, ties to the earlier part.
 * @param weights non-negative integers, not all zero
 */
export function allocate(amountMinor: number, weights: readonly number[]): number[] {
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  if (total <= 0 || weights.some((weight) => weight < 0 || !Number.isInteger(weight)))
    throw new RangeError('weights must be whole, not negative and not all zero');
  const sign = amountMinor < 0 ? -1 : 1;
  const amount = BigInt(Math.abs(amountMinor));
  const parts = weights.map((weight, index) => {
    const product = amount * BigInt(weight);
    return { index, share: Number(product / BigInt(total)), rest: product % BigInt(total) };
  });
  let left = Math.abs(amountMinor) - parts.reduce((sum, part) => sum + part.share, 0);
  const byRest = [...parts].sort((a, b) =>
    a.rest === b.rest ? a.index - b.index : a.rest > b.rest ? -1 : 1,
  );
  for (const part of byRest) if (left-- > 0) part.share += 1;
  return parts.map((part) => (part.share === 0 ? 0 : sign * part.share));
}

/**
 * The amount as Stripe's API counts it (docs.stripe.com/currencies): MGA has no minor unit there (ISO: 2), ISK is sent
 * times 100 (ISO: 0), three-decimal currencies must end in 0.
 * @throws RangeError for an amount that Stripe can't take.
 */
export function stripeAmount(amountMinor: number, currency: string): number {
  if (currency === 'MGA') {
    if (amountMinor % 100 !== 0) throw new RangeError('MGA is charged in whole units');
    return amountMinor / 100;
  }
  if (currency === 'ISK') return amountMinor * 100;
  if (currency === 'UGX')
    throw new RangeError('UGX: sources about its minor unit disagree, so it is refused');
  if (exponentOf(currency) === 3 && amountMinor % 10 !== 0)
    throw new RangeError(`${currency} amounts must end in 0`);
  if (exponentOf(currency) === 4) throw new RangeError(`${currency} is not offered`);
  return amountMinor;
}

/** The other way round. */
export function fromStripeAmount(amount: number, currency: string): number {
  if (currency === 'MGA') return amount * 100;
  if (currency === 'ISK') return amount / 100;
  return amount;
}
