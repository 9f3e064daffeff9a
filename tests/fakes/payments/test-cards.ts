/** What a card does when it is charged. */
export interface TestCard {
  number: string;
  brand: 'visa' | 'mastercard';
  outcome: 'succeeds' | 'declined' | 'authenticates' | 'disputed';
  /** Token by which the API names the same card. */
  token: string;
  decline?: { code: string; declineCode: string | null; message: string };
}

/** The published test cards that the stand-in knows. Source: the payment service's page on testing; the messages are its published ones. */
const CARDS: readonly TestCard[] = [
  { number: '4242424242424242', brand: 'visa', outcome: 'succeeds', token: 'pm_card_visa' },
  { number: '5555555555554444', brand: 'mastercard', outcome: 'succeeds', token: 'pm_card_mastercard' },
  { number: '4000000000000077', brand: 'visa', outcome: 'succeeds', token: 'pm_card_bypassPending' },
  {
    number: '4000000000000002',
    brand: 'visa',
    outcome: 'declined',
    token: 'pm_card_chargeDeclined',
    decline: { code: 'card_declined', declineCode: 'generic_decline', message: 'Your card was declined.' },
  },
  {
    number: '4000000000009995',
    brand: 'visa',
    outcome: 'declined',
    token: 'pm_card_chargeDeclinedInsufficientFunds',
    decline: {
      code: 'card_declined',
      declineCode: 'insufficient_funds',
      message: 'Your card has insufficient funds.',
    },
  },
  {
    number: '4000000000000069',
    brand: 'visa',
    outcome: 'declined',
    token: 'pm_card_chargeDeclinedExpiredCard',
    decline: { code: 'expired_card', declineCode: null, message: 'Your card has expired.' },
  },
  {
    number: '4000000000000127',
    brand: 'visa',
    outcome: 'declined',
    token: 'pm_card_chargeDeclinedIncorrectCvc',
    decline: { code: 'incorrect_cvc', declineCode: null, message: "Your card's security code is incorrect." },
  },
  {
    number: '4000002500003155',
    brand: 'visa',
    outcome: 'authenticates',
    token: 'pm_card_authenticationRequired',
  },
  { number: '4000000000000259', brand: 'visa', outcome: 'disputed', token: 'pm_card_createDispute' },
];

/** The card of a number (spaces are let through) or token; null for one that is no test card. */
export function findCard(numberOrToken: string): TestCard | null {
  const plain = numberOrToken.replace(/[\s-]/g, '');
  return CARDS.find((card) => card.number === plain || card.token === numberOrToken) ?? null;
}
