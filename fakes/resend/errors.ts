import type { ErrorResponse } from 'resend';
import { json, type FakeResponse } from '../web/message';

/** A refusal in Resend's shape: status, name, sentence (its documentation page on errors). */
export class MailRefusal extends Error {
  readonly status: number;
  readonly problem: ErrorResponse['name'];

  constructor(status: number, problem: ErrorResponse['name'], message: string) {
    super(message);
    this.status = status;
    this.problem = problem;
  }
}

/** The answer that carries a refusal. */
export function refusalAnswer(refusal: MailRefusal, headers: Record<string, string> = {}): FakeResponse {
  const body: ErrorResponse = { statusCode: refusal.status, name: refusal.problem, message: refusal.message };
  return json(refusal.status, body, headers);
}
