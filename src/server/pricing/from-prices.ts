import { estimate } from '../../commission/pricing/estimate';
import { estimateRequestSchema } from '../../commission/pricing/estimate-request';
import { formatMoney, share, type Currency } from '../../commission/money';
import { currentRateCard } from './rates';
import type { Services } from '../services';

/** What the catalogue's static pages fetch: money in minor units of `currency`, for one piece from the studio's pattern. */
export interface FromPrices {
  currency: Currency;
  ratesVersion: string;
  /** By slug: the price of the work alone, no carriage, without and with the studio's tax; also in words. */
  forms: Record<string, { fromMinor: number; fromWithTaxMinor: number; words: string; wordsWithTax: string }>;
  /** The studio's own settings for its alloys: density in g/cm3, contraction and melt loss as fractions. */
  alloys: { code: string; densityGPerCm3: number; contraction: number; meltLoss: number }[];
}

/** From-prices of every form at the studio's current rates. A form that cannot be priced today is left out. */
export async function fromPrices(services: Services): Promise<FromPrices> {
  const card = await currentRateCard(services);
  const forms: FromPrices['forms'] = {};
  for (const { slug } of card.forms) {
    const found = estimate(estimateRequestSchema.parse({ what: 'form', form: slug }), card);
    if (!found.ok) continue;
    const { fromMinor } = found.value;
    const fromWithTaxMinor = fromMinor + share(fromMinor, card.rates.vatRate);
    const words = (minor: number) => formatMoney(minor, card.rates.currency, { pence: 'whole' });
    forms[slug] = { fromMinor, fromWithTaxMinor, words: words(fromMinor), wordsWithTax: words(fromWithTaxMinor) };
  }
  return {
    currency: card.rates.currency,
    ratesVersion: card.rates.version,
    forms,
    alloys: card.rates.alloys.map(({ code, densityGPerCm3, contraction, meltLoss }) => ({
      code,
      densityGPerCm3,
      contraction,
      meltLoss,
    })),
  };
}
