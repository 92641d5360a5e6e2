import { json, type FakeResponse } from '../web/message';

export type StripeErrorType =
  'api_error' | 'card_error' | 'idempotency_error' | 'invalid_request_error' | 'rate_limit_error';

/** A refusal in Stripe's shape: HTTP status, type, code, the parameter it is about. */
export class Refusal extends Error {
  readonly status: number;
  readonly type: StripeErrorType;
  readonly code: string | undefined;
  readonly param: string | undefined;

  constructor(status: number, message: string, about: { type?: StripeErrorType; code?: string; param?: string } = {}) {
    super(message);
    this.status = status;
    this.type = about.type ?? 'invalid_request_error';
    this.code = about.code;
    this.param = about.param;
  }
}

/** 404 in Stripe's words for an id that is not on file. */
export function noSuch(kind: string, id: string, param = 'id'): Refusal {
  return new Refusal(404, `No such ${kind}: '${id}'`, { code: 'resource_missing', param });
}

/** 400 for a parameter that cannot be taken. */
export function badParam(param: string, message: string, code?: string): Refusal {
  return new Refusal(400, message, { param, code });
}

/** The answer that carries a refusal. */
export function refusalAnswer(refusal: Refusal, headers: Record<string, string>): FakeResponse {
  const { status, type, code, param, message } = refusal;
  const guide = code ? { doc_url: `https://stripe.com/docs/error-codes/${code.replaceAll('_', '-')}` } : {};
  return json(status, { error: { code, ...guide, message, param, type } }, headers);
}
