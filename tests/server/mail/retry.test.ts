import { describe, expect, test } from 'vitest';
import { judgeRefusal, secondsToNextTry } from '../../../src/server/mail/retry';

describe('what to do about a refusal', () => {
  // Names and statuses as the mail service's SDK declares and its error pages list them.
  test.each([
    ['validation_error', 422, 'give-up'],
    ['invalid_from_address', 422, 'give-up'],
    ['missing_required_field', 422, 'give-up'],
    ['invalid_idempotent_request', 409, 'look'],
    ['concurrent_idempotent_requests', 409, 'again'],
    ['rate_limit_exceeded', 429, 'again'],
    ['daily_quota_exceeded', 429, 'again'],
    ['application_error', null, 'again'],
    ['internal_server_error', 500, 'again'],
    ['validation_error', 401, 'again'],
    ['restricted_api_key', 401, 'again'],
  ] as const)('%s (%s): %s', (name, statusCode, verdict) => {
    expect(judgeRefusal({ name, statusCode })).toBe(verdict);
  });
});

test('tries come at growing distances, never more than a minute apart in the first half hour', () => {
  expect([1, 2, 3, 4, 5].map(secondsToNextTry)).toEqual([2, 4, 8, 16, 32]);
  let elapsed = 0;
  for (let tries = 1; elapsed < 30 * 60; tries += 1) {
    expect(secondsToNextTry(tries)).toBeLessThanOrEqual(60);
    elapsed += secondsToNextTry(tries);
  }
  expect(secondsToNextTry(200)).toBe(15 * 60);
});
