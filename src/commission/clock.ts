/** Days without the first payment after which a reminder goes out, and after which the agreement lapses. Common practice, no source. */
export const REMIND_DEPOSIT_AFTER_DAYS = 4;
export const DEPOSIT_LAPSES_AFTER_DAYS = 7;
/** Nobody is lapsed sooner than this after being reminded, however late the reminder went out. */
const REMINDED_FOR_AT_LEAST_DAYS = 3;

const DAY_MS = 24 * 60 * 60_000;

/** What the clock needs to know of a quote that is out. */
export interface QuoteOut {
  validUntil: Date;
  /** A payment for it is on its way: the bank takes days. */
  paymentPending: boolean;
}

/** T9: true once the validity has passed and no payment is on its way. */
export function quoteHasLapsed(quote: QuoteOut, now: Date): boolean {
  return !quote.paymentPending && now.getTime() > quote.validUntil.getTime();
}

/** What the clock needs to know of an agreement whose first payment has not been booked. */
export interface DepositAwaited {
  acceptedAt: Date;
  remindedAt: Date | null;
  paymentPending: boolean;
  /** The studio waits for a purchase order to be settled on terms of its own; the clock leaves it alone. */
  onCredit: boolean;
}

/** What the clock does about a first payment that is not there: nothing, M13, or T13. */
export function depositStanding(deposit: DepositAwaited, now: Date): 'wait' | 'remind' | 'lapse' {
  if (deposit.paymentPending || deposit.onCredit) return 'wait';
  if (!deposit.remindedAt) {
    return daysAfter(deposit.acceptedAt, REMIND_DEPOSIT_AFTER_DAYS) <= now ? 'remind' : 'wait';
  }
  return depositHeldUntil(deposit.acceptedAt, deposit.remindedAt) <= now ? 'lapse' : 'wait';
}

/** The instant until which the place is held: seven days, and three after a reminder that came late. */
export function depositHeldUntil(acceptedAt: Date, remindedAt: Date): Date {
  const usual = daysAfter(acceptedAt, DEPOSIT_LAPSES_AFTER_DAYS);
  const atLeast = daysAfter(remindedAt, REMINDED_FOR_AT_LEAST_DAYS);
  return usual > atLeast ? usual : atLeast;
}

function daysAfter(instant: Date, days: number): Date {
  return new Date(instant.getTime() + days * DAY_MS);
}
