import type { Subject } from './estimate-draft';
import { formatMoney } from '../money';
import type { EstimateRequest } from './estimate-request';
import type { PricedQuote } from './pricing-results';
import type { QuoteDraft } from './quote-draft';
import type { EstimateRates } from './rates';
import { sizeRatios } from './scaling';

/** A chance as people say it: 0.29 is "about 3 times in 10", 0.04 "about once in 25". */
export function chanceWords(chance: number): string {
  if (chance >= 0.95) return 'nearly every time';
  if (chance >= 0.2) return `about ${Math.round(chance * 10)} times in 10`;
  if (chance >= 0.005) return `about once in ${Math.round(1 / chance)}`;
  return 'hardly ever';
}

const percent = (share: number) => `${Math.round(share * 100)} %`;
const grams = (massG: number) => `${massG.toLocaleString('en-GB')} g`;

/** What the range rests on; a range is never shown without it. */
export function assumptionsOf(
  request: EstimateRequest,
  subject: Subject,
  draft: QuoteDraft,
  priced: PricedQuote,
  rates: EstimateRates,
): string[] {
  const { massesG, metal, massTolerance, soundness, lines } = draft;
  const pattern =
    subject.form && sizeRatios(subject.form, request).changed
      ? 'a new pattern at the size you want'
      : 'our own pattern';
  const { sound, failed } = subject.family;
  return [
    `${metal.name}, ${grams(massesG.poured)} poured for a finished piece of ${grams(massesG.finished)}, within ${percent(massTolerance)}.`,
    subject.form
      ? `It is cast from ${pattern}.`
      : 'Mass, surface and hours are reckoned from your figures, before we have seen a drawing.',
    `Hours and their spread are our own for “${soundness.familyName}”; of our last ${sound + failed} such pours ${sound} were sound.`,
    `Metal at ${formatMoney(metal.ingotMinorPerKg, priced.studio)} per kg, the studio’s rates ${draft.ratesVersion}.`,
    ...(lines.some(({ driver }) => driver === 'hours as asked for')
      ? ['Finishing hours as you set them, not our usual ones.']
      : []),
    ...(draft.currency.quoted === draft.currency.studio
      ? []
      : [
          `1 ${priced.studio} = ${draft.currency.rate.toFixed(4)} ${priced.quoted}, and ${percent(draft.currency.buffer)} for what rates may do until you accept.`,
        ]),
    draft.tax.kind === 'export'
      ? 'No tax of ours: the piece leaves the country. Duty and tax at your border are yours.'
      : `VAT at ${percent(rates.vatRate)}.`,
    'A range is not an offer. A quote is firm until its date.',
  ];
}

/** Why the price may end near the upper end, in plain words. */
export function risksOf(
  request: EstimateRequest,
  subject: Subject,
  draft: QuoteDraft,
  priced: PricedQuote,
  rates: EstimateRates,
): string[] {
  const { repourWeeks } = rates.throughput;
  const risks: string[] = [];
  if (priced.chanceOfRepour > 0.02) {
    const what = draft.pieces > 1 ? 'At least one piece is poured again' : 'The piece is poured again';
    risks.push(
      `${what} ${chanceWords(priced.chanceOfRepour)}. You never pay for a second pour, but it takes about ${repourWeeks} weeks.`,
    );
  }
  if (subject.family.code === 'thin') risks.push('Thin, long sections may freeze before the mould is full.');
  if (subject.family.code === 'cored') risks.push('A core can shift or break while the metal runs in.');
  if (subject.family.code === 'ornate') risks.push('Fine detail takes chasing, and hours on it vary most.');
  if (draft.hand.p90 >= 1.2)
    risks.push(`One such piece in ten takes ${percent(draft.hand.p90 - 1)} more hand work than we reckon, or worse.`);
  if (draft.lateShare >= 0.3)
    risks.push(`${percent(draft.lateShare)} of faults show only under the file, after hours of work.`);
  if (subject.form && sizeRatios(subject.form, request).changed)
    risks.push('At a new size we have no pours of our own to go by.');
  if (!subject.form) risks.push('We have not seen the piece: a drawing or a closed 3D file makes the range narrower.');
  return risks;
}
