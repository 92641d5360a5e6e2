import { bufferedRate } from '../../commission/pricing/currency';
import { draftFromEstimate } from '../../commission/pricing/estimate';
import { MARK_PLACES } from '../../commission/enquiry/enquiry-choices';
import type { Enquiry } from '../../commission/enquiry/enquiry';
import type { EstimateRequest } from '../../commission/pricing/estimate-request';
import type { Estimate } from '../../commission/pricing/pricing-results';
import type { CostLine } from '../../commission/pricing/cost-lines';
import type { DeskChoices } from '../../commission/pricing/desk-choices';
import { followsMasses } from '../../commission/pricing/follow-masses';
import { metalLines } from '../../commission/pricing/metal-lines';
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
 * A saved draft with today's metal, rates, history and queue. The owner's hours, words, masses, own lines and choice of
 * alloy, currency and rush stay; what is reckoned from prices (metal, heat, rates an hour) is reckoned anew.
 */
export function repricedDraft(saved: QuoteDraft, fresh: QuoteDraft, choices: DeskChoices): QuoteDraft {
  const metal = choices.alloys.find((alloy) => alloy.code === saved.metal.code) ?? fresh.metal;
  const reckoned = metalLines(saved.massesG, metal, choices.heatMinor, choices.planningLoadG);
  const lines = saved.lines.map((line) => {
    if (followsMasses(line)) return { ...line, ...amountOf(reckoned.find((each) => each.id === line.id) ?? line) };
    const now = fresh.lines.find((each) => each.id === line.id);
    if (!now) return line;
    const priced = { ...line, rateMinorPerHour: now.rateMinorPerHour };
    // An amount the owner typed over has lost its driver and is theirs to change.
    return line.driver === '' ? priced : { ...priced, ...amountOf(now) };
  });
  return {
    ...saved,
    lines,
    ratesVersion: fresh.ratesVersion,
    metal,
    soundness: fresh.soundness,
    hand: fresh.hand,
    lateShare: fresh.lateShare,
    pricing: { ...fresh.pricing, margin: saved.pricing.margin },
    currency: choices.currencies.find(({ quoted }) => quoted === saved.currency.quoted) ?? fresh.currency,
    rush: saved.rush && { ...saved.rush, heatMinor: choices.heatMinor },
    tax: { ...saved.tax, rate: fresh.tax.rate },
    dateRange: fresh.dateRange,
    termsVersion: fresh.termsVersion,
  };
}

function amountOf({ materialsMinor, driver }: CostLine) {
  return { materialsMinor, driver };
}
