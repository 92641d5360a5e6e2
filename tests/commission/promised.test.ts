import { expect, it } from 'vitest';
import { promiseStanding } from '../../src/commission/turn/promised';

const leaves = { to: '2026-11-09' };

it('promises days from the booking until the piece leaves, up to and with the later day', () => {
  expect(promiseStanding('booked', leaves, '2026-11-09')).toBe('ahead');
  expect(promiseStanding('finished', leaves, '2026-11-10')).toBe('passed');
  expect(promiseStanding('booked', null, '2026-11-09')).toBe('none');
});

it.each(['quoted', 'held', 'sent', 'lost', 'delivered', 'cancelled'] as const)('promises nothing when %s', (deal) => {
  expect(promiseStanding(deal, leaves, '2026-11-01')).toBe('none');
});
