import { estimate } from '../../commission/pricing/estimate';
import type { EstimateRequest, RateCard } from '../../commission/pricing/estimate-request';
import { may, type Actor } from '../../commission/permissions';
import { refuse, type Outcome } from '../../commission/problem';
import type { Estimate } from '../../commission/pricing/pricing-results';
import { publicCard } from '../../commission/pricing/public-card';
import { limit } from '../auth/limit';
import { currentRateCard } from './rates';
import type { Services } from '../services';

/** The rate card the price page reckons with. */
export async function readPublicCard(services: Services): Promise<RateCard> {
  return publicCard(await currentRateCard(services));
}

/** The server's estimate at the rates in force. `client` is the network address that limits count by. */
export async function makeEstimate(
  services: Services,
  actor: Actor,
  client: string,
  request: EstimateRequest,
): Promise<Outcome<Estimate>> {
  if (!may(actor, 'estimate:make')) return refuse('not-allowed', 'Prices are for customers and for the owners.');
  const allowed = await limit(services, 'estimate', client);
  if (!allowed.ok) return allowed;
  return estimate(request, await currentRateCard(services));
}
