import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { quietUntil } from '../../../src/server/mail/quiet-hours';

const night = { from: '20:30', to: '07:30' };
const until = (instant: string, zone = 'Europe/London') =>
  quietUntil('M19', new Date(instant), night, zone)?.toISOString() ?? null;

describe('quiet hours', () => {
  test('by day a letter goes, by night it waits for the morning', () => {
    expect(until('2027-01-12T12:00:00Z')).toBeNull();
    expect(until('2027-01-12T20:29:59Z')).toBeNull();
    expect(until('2027-01-12T20:30:00Z')).toBe('2027-01-13T07:30:00.000Z');
    expect(until('2027-01-13T03:00:00Z')).toBe('2027-01-13T07:30:00.000Z');
    expect(until('2027-01-13T07:30:00Z')).toBeNull();
  });

  // In the tz database Europe/London goes to summer time on 28 March 2027 at 01:00 UTC and back on 31 October 2027.
  test('summer time is followed on the nights it begins and ends', () => {
    expect(until('2027-03-27T23:00:00Z')).toBe('2027-03-28T06:30:00.000Z');
    expect(until('2027-10-30T22:00:00Z')).toBe('2027-10-31T07:30:00.000Z');
  });

  test('sign-in and receipts go at any hour', () => {
    const midnight = new Date('2027-01-13T00:00:00Z');
    for (const letter of ['M0', 'M1', 'M11', 'M12'] as const)
      expect(quietUntil(letter, midnight, night, 'Europe/London')).toBeNull();
    for (const letter of ['M2', 'M7', 'M13', 'M20', 'M26'] as const)
      expect(quietUntil(letter, midnight, night, 'Europe/London')).not.toBeNull();
  });

  test('a studio without quiet hours sends at once', () => {
    expect(quietUntil('M19', new Date('2027-01-13T00:00:00Z'), null, 'Europe/London')).toBeNull();
  });

  test('in any zone a letter waits less than a day and wakes at the hour its own clock shows', () => {
    const zones = ['Europe/London', 'America/New_York', 'Asia/Kathmandu', 'Australia/Lord_Howe'];
    const instants = fc.date({
      min: new Date('2027-01-01T00:00:00Z'),
      max: new Date('2028-01-01T00:00:00Z'),
      noInvalidDate: true,
    });
    fc.assert(
      fc.property(instants, fc.constantFrom(...zones), (now, timeZone) => {
        const wake = quietUntil('M19', now, night, timeZone);
        if (!wake) return;
        const clock = new Intl.DateTimeFormat('en-GB', { timeZone, hour: '2-digit', minute: '2-digit' }).format(wake);
        expect(clock).toBe('07:30');
        expect(wake.getTime()).toBeGreaterThan(now.getTime());
        expect(wake.getTime() - now.getTime()).toBeLessThan(12.5 * 3_600_000);
      }),
    );
  });
});
