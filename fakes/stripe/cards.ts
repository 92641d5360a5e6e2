/** What a test card does. The numbers are Stripe's published test cards. */
export type TestCard = {
  number: string;
  /** What the pay page says about it. */
  label: string;
  detail: string;
  outcome: 'accepted' | 'declined' | 'asks';
  /** What a later refund to it does. */
  refund: 'succeeds' | 'fails' | 'waits';
};

export const TEST_CARDS: TestCard[] = [
  {
    number: '4242424242424242',
    label: 'Card ending 4242',
    detail: 'The bank accepts it.',
    outcome: 'accepted',
    refund: 'succeeds',
  },
  {
    number: '4000002500003155',
    label: 'Card ending 3155',
    detail: 'The bank asks you to confirm on a second page.',
    outcome: 'asks',
    refund: 'succeeds',
  },
  {
    number: '4000000000000002',
    label: 'Card ending 0002',
    detail: 'The bank declines it.',
    outcome: 'declined',
    refund: 'succeeds',
  },
  {
    number: '4000000000005126',
    label: 'Card ending 5126',
    detail: 'The bank accepts it; a later refund to it fails.',
    outcome: 'accepted',
    refund: 'fails',
  },
  {
    number: '4000000000007726',
    label: 'Card ending 7726',
    detail: 'The bank accepts it; a later refund to it takes days.',
    outcome: 'accepted',
    refund: 'waits',
  },
];

/** The test card with this number; spaces do not matter. */
export function testCard(number: string): TestCard | undefined {
  const digits = number.replaceAll(' ', '');
  return TEST_CARDS.find((card) => card.number === digits);
}
