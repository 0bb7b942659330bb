import type { IntentError } from './sessions.ts';

export type TestCard = {
  number: string;
  label: string;
  says: string;
  plays: { kind: 'pays' } | { kind: 'slow' } | { kind: 'authenticates' } | { kind: 'declined'; error: IntentError };
};

const declined = (decline_code: string, message: string): TestCard['plays'] => ({
  kind: 'declined',
  error: { type: 'card_error', code: 'card_declined', decline_code, message },
});

/** Cards a person can choose on the page; no card number is ever typed. */
export const TEST_CARDS: readonly TestCard[] = [
  { number: '4242424242424242', label: '4242', says: 'Pays at once', plays: { kind: 'pays' } },
  {
    number: '4000002500003155',
    label: '3155',
    says: 'Asks you to confirm, as a bank would',
    plays: { kind: 'authenticates' },
  },
  { number: '4000000000000077', label: '0077', says: 'Is slow: clears after a few seconds', plays: { kind: 'slow' } },
  {
    number: '4000000000000002',
    label: '0002',
    says: 'Is declined',
    plays: declined('generic_decline', 'Your card was declined.'),
  },
  {
    number: '4000000000009995',
    label: '9995',
    says: 'Is declined: not enough money on it',
    plays: declined('insufficient_funds', 'Your card has insufficient funds.'),
  },
  {
    number: '4000000000000069',
    label: '0069',
    says: 'Has expired',
    plays: {
      kind: 'declined',
      error: { type: 'card_error', code: 'expired_card', message: 'Your card has expired.' },
    },
  },
];
