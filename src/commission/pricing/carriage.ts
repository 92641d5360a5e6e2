import type { CarriageZone, StudioRates } from './rates';

/** What a parcel's price depends on: country, mass with hafts in g, whether it holds a bladed weapon, its longest side, its worth. */
export interface Parcel {
  country: string;
  massG: number;
  blade: boolean;
  longestMm: number;
  valueMinor: number;
}

/** The zone that lists the country, or the one that takes everywhere else. */
export function carriageZone(rates: Pick<StudioRates, 'carriage'>, country: string): CarriageZone {
  const named = rates.carriage.find((zone) => zone.countries.includes(country));
  const zone = named ?? rates.carriage.find((other) => other.countries.length === 0) ?? rates.carriage.at(-1);
  if (!zone) throw new RangeError('The rates have no carriage zone.');
  return zone;
}

/** Price of carriage in the studio's currency before tax, and what it buys. Heavier than the last band pays pro rata of it. */
export function carriageFor(rates: Pick<StudioRates, 'carriage'>, parcel: Parcel): { minor: number; words: string } {
  const zone = carriageZone(rates, parcel.country);
  if (parcel.blade && parcel.longestMm > zone.longBladeMm) {
    return { minor: zone.longBladeMinor, words: `Insured carriage, ${zone.name}: long blade, an adult must sign` };
  }
  const insured = parcel.valueMinor > zone.insureAboveMinor;
  const extra = parcel.blade || insured ? zone.signedMinor : 0;
  const last = zone.bands.at(-1);
  const band = zone.bands.find(({ upToG }) => parcel.massG <= upToG);
  const parcels = band || !last ? 1 : Math.ceil(parcel.massG / last.upToG);
  const base = (band ?? last)?.amountMinor ?? 0;
  const signed = parcel.blade ? ', an adult must sign' : insured ? ', insured and signed for' : '';
  return { minor: base * parcels + extra, words: `Carriage, ${zone.name}${signed}` };
}
