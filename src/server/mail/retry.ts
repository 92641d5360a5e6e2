import type { ErrorResponse } from 'resend';

/** Refusals that a second try cannot cure: something about this one mail is wrong. Names as the SDK declares them. */
const FINAL: readonly ErrorResponse['name'][] = [
  'validation_error',
  'invalid_attachment',
  'invalid_from_address',
  'invalid_parameter',
  'invalid_access',
  'invalid_idempotency_key',
  'missing_required_field',
  'security_error',
];

/** What to do about a refusal: give up, look whether an earlier try went through, or try again later. */
export function judgeRefusal(error: Pick<ErrorResponse, 'name' | 'statusCode'>): 'give-up' | 'look' | 'again' {
  // Another body under the same key: an earlier try of this mail was taken, whatever its answer was.
  if (error.name === 'invalid_idempotent_request') return 'look';
  // A key or a sender's domain that is not accepted is cured in the settings, and then the mail may go.
  if (error.statusCode === 401 || error.statusCode === 403) return 'again';
  if (FINAL.includes(error.name) || error.statusCode === 422) return 'give-up';
  return 'again';
}

/** A mail that cannot be handed over for this long is given to the owner instead. */
export const GIVE_UP_AFTER_MS = 3 * 24 * 60 * 60_000;

/** The mail service forgets idempotency keys after a day; from then on it is asked before sending again. */
export const KEY_KEPT_MS = 24 * 60 * 60_000;

const LONGEST_WAIT_S = 60;
const PATIENT_WAIT_S = 15 * 60;
const PATIENT_AFTER_TRIES = 40;

/**
 * Seconds until the next try: 2, 4, 8, … up to a minute, so that an outage of minutes ends within a minute of
 * its end; after some 40 minutes every quarter of an hour.
 */
export function secondsToNextTry(tries: number): number {
  if (tries > PATIENT_AFTER_TRIES) return PATIENT_WAIT_S;
  return Math.min(2 ** Math.max(1, tries), LONGEST_WAIT_S);
}

/** The last refusal in words for the owner's mail log. */
export function refusalInWords(error: Pick<ErrorResponse, 'name' | 'message' | 'statusCode'>): string {
  if (error.statusCode === null) return 'The mail service could not be reached.';
  if (error.name === 'rate_limit_exceeded') return 'The mail service asked for a pause between mails.';
  if (error.name.endsWith('_quota_exceeded')) return 'The mail service’s allowance for this period is used up.';
  if (error.statusCode === 401 || error.name.endsWith('_api_key'))
    return 'The mail service does not accept our key. Check RESEND_API_KEY.';
  if (error.statusCode >= 500) return 'The mail service is having trouble of its own.';
  return `The mail service refused it: ${error.message}`;
}
