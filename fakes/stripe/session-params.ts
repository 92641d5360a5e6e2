import { z } from 'zod';
import { clearable, currency, metadata, paging, range, whole, yesNo } from './params';

/** A web address; `{CHECKOUT_SESSION_ID}` may stand in it. */
const address = z
  .string()
  .max(5000)
  .refine(
    (text) => /^https?:\/\//.test(text) && URL.canParse(text),
    'Not a valid URL: give the whole address with http:// or https://.',
  );

const priceData = z.strictObject({
  currency,
  unit_amount: whole.refine((amount) => amount >= 0 && amount <= 99_999_999, 'The amount must be from 0 to 99999999.'),
  tax_behavior: z.enum(['exclusive', 'inclusive', 'unspecified']).optional(),
  product_data: z.strictObject({
    name: z.string().min(1),
    description: z.string().min(1).optional(),
    images: z.array(address).max(8).optional(),
    metadata,
    tax_code: z.string().optional(),
  }),
});

const line = z.strictObject({
  price_data: priceData,
  quantity: whole.refine((count) => count >= 1 && count <= 999_999, 'The quantity must be at least 1.'),
  metadata,
});

const descriptor = z
  .string()
  .max(22, 'Statement descriptors are limited to 22 characters.')
  .refine((text) => /[A-Za-z]/.test(text) && !/[<>\\'"*]/.test(text), 'Needs a letter and none of < > \\ \' " *')
  .optional();

const intentData = z
  .strictObject({
    metadata,
    description: clearable,
    receipt_email: z.email().optional(),
    statement_descriptor: descriptor,
    statement_descriptor_suffix: descriptor,
  })
  .optional();

export const METHODS = ['card', 'bacs_debit', 'sepa_debit', 'us_bank_account'] as const;

/** Parameters that change nothing here but must not be refused. */
const ignored = z.unknown().optional();

/** The parameters of a new Checkout Session: mode "payment" on Stripe's own page, prices given in place. */
export const sessionSchema = z.strictObject({
  mode: z.literal('payment', 'This stand-in knows the mode "payment" only.'),
  ui_mode: z.literal('hosted_page', 'This stand-in knows the hosted page only.').optional(),
  line_items: z.array(line).min(1).max(100),
  success_url: address,
  cancel_url: address.optional(),
  expires_at: whole.optional(),
  client_reference_id: z.string().max(200).optional(),
  customer: z.string().optional(),
  customer_email: z.email('Invalid email address.').optional(),
  customer_creation: z.enum(['always', 'if_required']).optional(),
  payment_method_types: z.array(z.enum(METHODS)).min(1).optional(),
  payment_intent_data: intentData,
  metadata,
  branding_settings: z.looseObject({ display_name: z.string().min(1).optional() }).optional(),
  locale: z.string().optional(),
  submit_type: z.enum(['auto', 'book', 'donate', 'pay']).optional(),
  billing_address_collection: z.enum(['auto', 'required']).optional(),
  allow_promotion_codes: yesNo.optional(),
  automatic_tax: ignored,
  consent_collection: ignored,
  custom_text: ignored,
  invoice_creation: ignored,
  payment_method_options: ignored,
  phone_number_collection: ignored,
});

export type SessionInput = z.output<typeof sessionSchema>;
export type LineInput = SessionInput['line_items'][number];

/** Which sessions a list shows. */
export const sessionListSchema = z.strictObject({
  ...paging,
  created: range,
  customer: z.string().optional(),
  customer_details: z.strictObject({ email: z.string() }).optional(),
  payment_intent: z.string().optional(),
  status: z.enum(['complete', 'expired', 'open']).optional(),
});

export const pagingSchema = z.strictObject(paging);
