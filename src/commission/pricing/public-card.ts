import { nearestRank } from './calibration';
import { rateCardSchema, type RateCard } from './estimate-request';
import type { Throughput } from './rates';

const WEEKS = 10;

/** Ten weeks with the typical (P50) and the slow (P10) week of the studio's own, and nothing else of its diary. */
function paceOnly(throughput: Throughput): Throughput {
  const { finishedHoursByWeek } = throughput;
  const [slow, typical] = [nearestRank(finishedHoursByWeek, 0.1), nearestRank(finishedHoursByWeek, 0.5)];
  return {
    ...throughput,
    finishedHoursByWeek: Array.from({ length: WEEKS }, (_, week) => (week === 0 ? slow : typical)),
  };
}

/**
 * The rate card that a page may have. An estimate in the page agrees with the server's to the minor unit only when it is
 * reckoned from the same rates, so those go along; what no estimate asks for (furnaces, the weeks' hours) stays here.
 */
export function publicCard({ rates, forms }: RateCard): RateCard {
  return rateCardSchema.parse({ rates: { ...rates, throughput: paceOnly(rates.throughput) }, forms });
}
