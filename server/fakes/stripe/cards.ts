/** Documented test cards and their outcomes (docs.stripe.com/testing). Any future expiry, any CVC. */
export type CardOutcome =
  | { kind: 'paid' }
  | { kind: 'declined'; code: string; declineCode: string; message: string }
  | { kind: 'authenticate' };

const declined = (code: string, declineCode: string, message: string): CardOutcome => ({
  kind: 'declined',
  code,
  declineCode,
  message,
});

const OUTCOMES: Record<string, CardOutcome> = {
  '4242424242424242': { kind: 'paid' },
  '5555555555554444': { kind: 'paid' },
  '378282246310005': { kind: 'paid' },
  '4000000000000259': { kind: 'paid' },
  '4000000000000002': declined('card_declined', 'generic_decline', 'Your card was declined.'),
  '4000000000009995': declined('card_declined', 'insufficient_funds', 'Your card has insufficient funds.'),
  '4000000000009987': declined('card_declined', 'lost_card', 'Your card was declined.'),
  '4000000000009979': declined('card_declined', 'stolen_card', 'Your card was declined.'),
  '4000000000000069': declined('expired_card', 'expired_card', 'Your card has expired.'),
  '4000000000000127': declined('incorrect_cvc', 'incorrect_cvc', "Your card's security code is incorrect."),
  '4000000000000119': declined(
    'processing_error',
    'processing_error',
    'An error occurred while processing your card. Try again in a little bit.',
  ),
  '4000002500003155': { kind: 'authenticate' },
  '4000002760003184': { kind: 'authenticate' },
};

/** Luhn's check (ISO/IEC 7812-1). */
export function luhn(number: string): boolean {
  const sum = [...number].reverse().reduce((total, digit, index) => {
    const value = Number(digit) * (index % 2 === 1 ? 2 : 1);
    return total + (value > 9 ? value - 9 : value);
  }, 0);
  return /^\d{12,19}$/.test(number) && sum % 10 === 0;
}

export function outcomeOf(number: string): CardOutcome {
  const digits = number.replace(/[\s-]/g, '');
  if (!luhn(digits))
    return declined('incorrect_number', 'incorrect_number', 'Your card number is incorrect.');
  return (
    OUTCOMES[digits] ??
    declined(
      'card_declined',
      'test_mode_live_card',
      'This is a test page. Use one of the test cards listed below.',
    )
  );
}
