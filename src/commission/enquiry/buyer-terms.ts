import { z } from 'zod';
import { emptyIsNone, optionalText, wholeNumber } from '../input-fields';

/** What an institution pays by: the number of its purchase order, and days it may take. Empty is none. */
export const buyerTermsSchema = z.object({
  poNumber: optionalText(60, 'Keep the purchase order’s number under 60 characters.'),
  netDays: z.preprocess(
    emptyIsNone,
    wholeNumber('Give whole days from 1 to 120, or leave it empty.', 1, 120).optional(),
  ),
});
export type BuyerTerms = z.output<typeof buyerTermsSchema>;
