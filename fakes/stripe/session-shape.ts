import type Stripe from 'stripe';
import { freshId } from '../state/ids';
import type { LineInput, SessionInput } from './session-params';
import type { LineOnWire } from './world';

/** Sessions live 24 hours unless told (Stripe's API reference). */
const USUAL_LIFE_SECONDS = 24 * 60 * 60;

/** A line as the API shows it, with the price made for it. Amounts in minor units. */
export function lineOnWire(line: LineInput, now: number): LineOnWire {
  const { currency, unit_amount: unit, product_data: product, tax_behavior: tax } = line.price_data;
  const total = unit * line.quantity;
  return {
    id: freshId('li_'),
    object: 'item',
    adjustable_quantity: null,
    amount_discount: 0,
    amount_subtotal: total,
    amount_tax: 0,
    amount_total: total,
    currency,
    description: product.name,
    metadata: line.metadata ?? {},
    price: {
      id: freshId('price_'),
      object: 'price',
      active: false,
      billing_scheme: 'per_unit',
      created: now,
      currency,
      custom_unit_amount: null,
      livemode: false,
      lookup_key: null,
      metadata: {},
      nickname: null,
      product: freshId('prod_', 14),
      recurring: null,
      tax_behavior: tax ?? 'unspecified',
      tiers_mode: null,
      transform_quantity: null,
      type: 'one_time',
      unit_amount: unit,
      unit_amount_decimal: String(unit),
    },
    quantity: line.quantity,
  };
}

type Rest = {
  id: string;
  now: number;
  url: string;
  currency: string;
  amount: number;
  methods: string[];
  email: string | null;
};

/** An open session as the API shows it. Every field of the SDK's type is there; those this stand-in has no use for are empty. */
export function openSession(input: SessionInput, rest: Rest): Stripe.Checkout.Session {
  const { id, now, url, currency, amount, methods, email } = rest;
  return {
    ...emptyFields(),
    id,
    object: 'checkout.session',
    allow_promotion_codes: input.allow_promotion_codes ?? null,
    amount_subtotal: amount,
    amount_total: amount,
    billing_address_collection: input.billing_address_collection ?? null,
    cancel_url: input.cancel_url ?? null,
    client_reference_id: input.client_reference_id ?? null,
    created: now,
    currency,
    customer: input.customer ?? null,
    customer_creation: input.customer ? null : (input.customer_creation ?? 'if_required'),
    customer_details: email ? personDetails(email, null) : null,
    customer_email: input.customer_email ?? null,
    expires_at: input.expires_at ?? now + USUAL_LIFE_SECONDS,
    livemode: false,
    locale: (input.locale as Stripe.Checkout.Session.Locale | undefined) ?? null,
    metadata: input.metadata ?? {},
    mode: 'payment',
    payment_intent: null,
    payment_method_types: methods,
    payment_status: 'unpaid',
    status: 'open',
    submit_type: input.submit_type ?? null,
    success_url: input.success_url,
    total_details: { amount_discount: 0, amount_shipping: 0, amount_tax: 0 },
    ui_mode: 'hosted_page',
    url,
  };
}

/** Who pays, as a session shows it. */
export function personDetails(email: string, name: string | null): Stripe.Checkout.Session.CustomerDetails {
  return {
    address: null,
    business_name: null,
    email,
    individual_name: null,
    name,
    phone: null,
    tax_exempt: 'none',
    tax_ids: [],
  };
}

function emptyFields() {
  return {
    adaptive_pricing: { enabled: false },
    after_expiration: null,
    allowed_payment_method_types: null,
    automatic_tax: { enabled: false, liability: null, provider: null, status: null },
    client_secret: null,
    collected_information: null,
    consent: null,
    consent_collection: null,
    currency_conversion: null,
    custom_fields: [],
    custom_text: { after_submit: null, shipping_address: null, submit: null, terms_of_service_acceptance: null },
    customer_account: null,
    discounts: [],
    integration_identifier: null,
    invoice: null,
    invoice_creation: null,
    managed_payments: null,
    origin_context: null,
    payment_link: null,
    payment_method_collection: 'if_required',
    payment_method_configuration_details: null,
    payment_method_options: {},
    permissions: null,
    phone_number_collection: { enabled: false },
    recovered_from: null,
    saved_payment_method_options: null,
    setup_intent: null,
    shipping_address_collection: null,
    shipping_cost: null,
    shipping_options: [],
    subscription: null,
    wallet_options: null,
  } satisfies Partial<Stripe.Checkout.Session>;
}
