import type { PricedQuote } from '../../commission/pricing/pricing-results';
import { done, refuse, type Outcome, type Problem } from '../../commission/problem';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { usualValidityDays } from '../../commission/pricing/quote-warnings';
import { rightsObstacle, type Rights } from '../../commission/enquiry/rights';
import type { StudioRates } from '../../commission/pricing/rates';
import { findTerms, CURRENT_TERMS, type Terms } from '../../commission/terms';
import type { CommissionRow } from '../commissions';

/** Says why a priced draft may not be sent as a quote, or gives the terms it is written under. */
export function checkQuote(
  commission: CommissionRow,
  draft: QuoteDraft,
  priced: PricedQuote,
  rights: Rights,
  rates: Pick<StudioRates, 'alloys'>,
): Outcome<Terms> {
  if (!commission.confirmedAt)
    return refuse(
      'conflict',
      'The customer’s address is not confirmed yet, so a quote would reach nobody for certain.',
    );
  if (commission.deal === 'asking')
    return refuse('conflict', 'The customer still has your questions open. Quote when the answers are in.');
  const obstacle = rightsObstacle(rights);
  if (obstacle) return refuse('conflict', obstacle);
  const blocking = priced.warnings.filter((warning) => warning.blocking);
  if (blocking.length > 0) return { ok: false, problem: blockingProblem(draft, blocking) };
  const hold = usualValidityDays(draft, priced);
  if (draft.validityDays > hold)
    return refuseField('validityDays', `The metal’s price holds for ${hold} days; a quote cannot stand for longer.`);
  if (commission.deal === 'lapsed' && !isTodaysMetal(draft, rates))
    return refuse(
      'conflict',
      'This commission lapsed, and the metal has another price today. Take today’s rates at the desk, look at the price again, and send.',
    );
  const terms = findTerms(draft.termsVersion);
  if (terms?.version !== CURRENT_TERMS.version)
    return refuse(
      'conflict',
      'The draft names an older version of the terms. Take today’s rates and terms, then send.',
    );
  return done(terms);
}

function blockingProblem(draft: QuoteDraft, blocking: PricedQuote['warnings']): Problem {
  const fields: Record<string, string> = {};
  for (const warning of blocking) {
    if (warning.code === 'outside-range') fields['outOfRangeReason'] = warning.message;
    if (warning.code === 'masses') fields['finishedMassG'] = warning.message;
  }
  draft.lines.forEach((line, index) => {
    const costsNothing = blocking.some(
      ({ code, message }) => code === 'zero-line' && message.includes(`"${line.label}"`),
    );
    if (costsNothing) fields[`lines.${index}.zeroReason`] = 'Give hours or an amount, or say why it costs nothing.';
  });
  return { code: 'invalid', message: blocking.map((warning) => warning.message).join(' '), fields };
}

function isTodaysMetal({ metal }: QuoteDraft, { alloys }: Pick<StudioRates, 'alloys'>): boolean {
  const today = alloys.find((alloy) => alloy.code === metal.code);
  return (
    today !== undefined &&
    today.ingotMinorPerKg === metal.ingotMinorPerKg &&
    today.returnsMinorPerKg === metal.returnsMinorPerKg
  );
}

function refuseField(field: string, message: string) {
  return refuse('invalid', message, { [field]: message });
}
