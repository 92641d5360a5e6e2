import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { estimate } from '../../src/commission/pricing/estimate';
import {
  type EstimateRequest,
  type EstimateRequestInput,
  estimateRequestSchema,
  rateCardSchema,
} from '../../src/commission/pricing/estimate-request';
import type { Estimate } from '../../src/commission/pricing/pricing-results';
import { formSchema } from '../../src/commission/pricing/form';
import { demoRates } from '../../src/demo/rates';

const folder = join(import.meta.dirname, '../../src/content/forms');

/** The fourteen forms as their content files stand. */
export const forms = readdirSync(folder)
  .filter((name) => name.endsWith('.json'))
  .map((name) => formSchema.parse(JSON.parse(readFileSync(join(folder, name), 'utf8'))));

/** The demo studio's rate card, as the page fetches it. */
export const card = rateCardSchema.parse({ rates: demoRates, forms });

export function request(input: Partial<EstimateRequestInput>): EstimateRequest {
  return estimateRequestSchema.parse(input);
}

/** The estimate for what a plain form would post; fails the test when it is refused. */
export function estimated(input: Partial<EstimateRequestInput>): Estimate {
  const result = estimate(request(input), card);
  if (!result.ok) throw new Error(result.problem.message);
  return result.value;
}
