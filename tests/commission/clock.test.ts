import { describe, expect, test } from 'vitest';
import { depositHeldUntil, depositStanding, quoteHasLapsed } from '../../src/commission/clock';

const at = (text: string) => new Date(`2027-${text}Z`);

describe('a quote that is out', () => {
  const validUntil = at('01-31T17:00:00');

  test('stands to the last instant of its validity and lapses after it', () => {
    expect(quoteHasLapsed({ validUntil, paymentPending: false }, validUntil)).toBe(false);
    expect(quoteHasLapsed({ validUntil, paymentPending: false }, at('01-31T17:00:01'))).toBe(true);
  });

  test('does not lapse while a payment is on its way', () => {
    expect(quoteHasLapsed({ validUntil, paymentPending: true }, at('03-01T00:00:00'))).toBe(false);
  });
});

// Days from the studio's description of its job: M13 after 4 days (section 5), T13 after 7 (section 2).
describe('a first payment that has not come', () => {
  const acceptedAt = at('01-01T10:00:00');
  const awaited = { acceptedAt, remindedAt: null, paymentPending: false, onCredit: false };

  test('is waited for four days, then reminded of', () => {
    expect(depositStanding(awaited, at('01-05T09:59:59'))).toBe('wait');
    expect(depositStanding(awaited, at('01-05T10:00:00'))).toBe('remind');
  });

  test('lapses after seven days, when it was reminded of', () => {
    const reminded = { ...awaited, remindedAt: at('01-05T10:00:00') };
    expect(depositStanding(reminded, at('01-08T09:59:59'))).toBe('wait');
    expect(depositStanding(reminded, at('01-08T10:00:00'))).toBe('lapse');
  });

  test('is reminded of first however late the clock looks, and gets three days from then', () => {
    expect(depositStanding(awaited, at('01-20T10:00:00'))).toBe('remind');
    const reminded = { ...awaited, remindedAt: at('01-20T10:00:00') };
    expect(depositStanding(reminded, at('01-23T09:59:59'))).toBe('wait');
    expect(depositStanding(reminded, at('01-23T10:00:00'))).toBe('lapse');
    expect(depositHeldUntil(acceptedAt, at('01-20T10:00:00'))).toEqual(at('01-23T10:00:00'));
  });

  test('is left alone while a payment is on its way, and where the studio gave credit', () => {
    const late = at('02-01T00:00:00');
    expect(depositStanding({ ...awaited, paymentPending: true }, late)).toBe('wait');
    expect(depositStanding({ ...awaited, onCredit: true }, late)).toBe('wait');
  });
});
