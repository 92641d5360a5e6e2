import type { APIRoute } from 'astro';
import { z } from 'zod';
import { enquirySchema } from '../../../commission/enquiry/enquiry';
import { readFields, spokenQuery } from '../../../commission/pricing/estimate-fields';
import { rememberAsked, visitorOf } from '../../../server/auth/door-cookies';
import { answer, readInput } from '../../../server/door';
import { sendEnquiry } from '../../../server/enquiry/enquiries';

export const prerender = false;

/** Takes in an enquiry; a guest is led to the page that asks for the mailed code. Refused, it goes back with its piece. */
export const POST: APIRoute = async (context) => {
  const { services, user, browserId } = context.locals;
  const { client } = visitorOf(context);
  const input = await readInput(context, enquirySchema);
  const typed = await readInput(context, z.looseObject({}));
  const piece = typed.ok ? spokenQuery(readFields(Object.entries(typed.value))) : '';
  const outcome = input.ok ? await sendEnquiry(services, user, { browserId, client }, input.value) : input;
  if (outcome.ok && !outcome.value.confirmed) rememberAsked(services.config, context, outcome.value.email);
  return answer(context, outcome, {
    to: ({ ref, confirmed }) => {
      if (user?.role === 'owner') return `/studio/commissions/${ref}`;
      return confirmed ? `/commissions/${ref}` : `/price/sent?ref=${ref}`;
    },
    back: `/price/enquire?${piece}`,
  });
};
