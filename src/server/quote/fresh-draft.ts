import { bufferedRate } from '../../commission/pricing/currency';
import { draftFromEstimate } from '../../commission/pricing/estimate';
import { MARK_PLACES } from '../../commission/enquiry/enquiry-choices';
import type { Enquiry } from '../../commission/enquiry/enquiry';
import type { EstimateRequest } from '../../commission/pricing/estimate-request';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { done, type Outcome } from '../../commission/problem';
import type { QuoteDraft } from '../../commission/pricing/quote-draft';
import { CURRENT_TERMS } from '../../commission/terms';
import type { OwnerEstimate } from '../../commission/enquiry/triage';
import type { CommissionRow } from '../commissions';
import { currentRateCard } from '../pricing/rates';
import type { Services } from '../services';
import { readStudio } from '../studio';

/** A draft from the customer's own estimate by today's rates, with the range they were shown and today's terms. */
export async function freshDraft(services: Services, commission: CommissionRow): Promise<Outcome<QuoteDraft>> {
  const card = await currentRateCard(services);
  const drafted = draftFromEstimate(commission.estimateRequest as EstimateRequest, card);
  if (!drafted.ok) return drafted;
  const { mark } = await readStudio(services.db);
  const place = MARK_PLACES[(commission.enquiry as Enquiry).mark ?? 'visible'];
  return done({
    ...drafted.value,
    shownRange: shownRange(commission, drafted.value) ?? drafted.value.shownRange,
    termsVersion: CURRENT_TERMS.version,
    mark: `${mark}, ${place[0]!.toLowerCase()}${place.slice(1)}`,
  });
}

/** The range the customer read, in the studio's currency: the owner's if one was sent, else the estimate's own. */
function shownRange(commission: CommissionRow, draft: QuoteDraft): QuoteDraft['shownRange'] {
  const sent = commission.ownerEstimate as OwnerEstimate | null;
  const { low, high } = (commission.estimate as Estimate).rangeMinor;
  const range = sent ? { lowMinor: sent.lowMinor, highMinor: sent.highMinor } : { lowMinor: low, highMinor: high };
  if (draft.currency.quoted === draft.currency.studio) return range;
  const rate = bufferedRate(draft.currency);
  return { lowMinor: Math.floor(range.lowMinor / rate), highMinor: Math.ceil(range.highMinor / rate) };
}

/**
 * A saved draft with today's metal, rates, history and queue. The owner's hours, words and own lines stay; what is
 * reckoned from prices (metal, heat, rates an hour) is taken from the fresh one.
 */
export function repricedDraft(saved: QuoteDraft, fresh: QuoteDraft): QuoteDraft {
  const lines = saved.lines.map((line) => {
    const now = fresh.lines.find((each) => each.id === line.id);
    if (!now) return line;
    return { ...line, rateMinorPerHour: now.rateMinorPerHour, materialsMinor: now.materialsMinor, driver: now.driver };
  });
  return {
    ...saved,
    lines,
    ratesVersion: fresh.ratesVersion,
    metal: fresh.metal,
    soundness: fresh.soundness,
    hand: fresh.hand,
    lateShare: fresh.lateShare,
    pricing: { ...fresh.pricing, margin: saved.pricing.margin },
    currency: fresh.currency,
    dateRange: fresh.dateRange,
    termsVersion: fresh.termsVersion,
  };
}
