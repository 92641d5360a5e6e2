import { isBladed, missingDeclaration, requestOf, type Enquiry } from '../../commission/enquiry/enquiry';
import { asksForForgery, MARK_REFUSAL } from '../../commission/enquiry/enquiry-choices';
import { estimate } from '../../commission/pricing/estimate';
import { findSubject, type Subject } from '../../commission/pricing/estimate-draft';
import type { Actor } from '../../commission/permissions';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { done, refuse, type Outcome } from '../../commission/problem';
import { normaliseAddress } from '../auth/address';
import { currentRateCard } from '../pricing/rates';
import type { Services } from '../services';

/** What the server found out about an enquiry before it keeps it. */
export interface CheckedEnquiry {
  email: string;
  subject: Subject;
  bladed: boolean;
  estimate: Estimate;
  currency: Estimate['currency'];
}

/** Checks what only the server can: the address, the blade's declaration, the wish, and the price by today's rates. */
export async function checkEnquiry(services: Services, actor: Actor, input: Enquiry): Promise<Outcome<CheckedEnquiry>> {
  const email = actor?.role === 'customer' ? actor.email : normaliseAddress(input.email);
  if (!email)
    return refuseField('email', 'This is not one mail address. It should look like name@example.org, without spaces.');
  const byOwner = actor?.role === 'owner';
  if (!byOwner && asksForForgery(`${input.wish}\n${input.rightsNote ?? ''}`)) return refuseField('wish', MARK_REFUSAL);
  if (input.neededBy === 'date' && (input.neededByDate ?? '') <= services.now().toISOString().slice(0, 10))
    return refuseField('neededByDate', 'This day is past. Give the day on which the piece must be in your hands.');
  const card = await currentRateCard(services);
  const request = requestOf(input);
  const bladed = isBladed(request, card.forms);
  const undeclared = missingDeclaration(bladed, input.adult);
  if (undeclared && !byOwner) return refuseField('adult', undeclared);
  const subject = findSubject(request, card);
  if (!subject.ok) return subject;
  const reckoned = estimate(request, card);
  if (!reckoned.ok) return reckoned;
  const { value } = reckoned;
  return done({ email, subject: subject.value, bladed, estimate: value, currency: value.currency });
}

function refuseField(field: string, message: string) {
  return refuse('invalid', message, { [field]: message });
}
