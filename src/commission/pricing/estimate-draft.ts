import { carriageFor, carriageZone } from './carriage';
import type { CostLine } from './cost-lines';
import { sumHand } from './cost-sums';
import { dateRange } from './date-range';
import type { EstimateRequest, RateCard } from './estimate-request';
import type { PricedForm } from './form';
import { chosenHaft, findRoute, formLines } from './form-lines';
import { type Masses, metalLines } from './metal-lines';
import { halfUp } from '../money';
import { ownFamilyCode, ownLines, ownMasses } from './own-piece';
import { done, type Outcome, refuse } from '../problem';
import { priceQuote } from './quote';
import type { QuoteDraft, Rush } from './quote-draft';
import { type AlloyRate, type Family, findAlloy, findFamily, heatMinor, type EstimateRates } from './rates';
import { sizeRatios } from './scaling';
import { failureChance, soundnessOf } from './soundness';

/** What the request names, found in the rate card. `form` is null for a piece of the buyer's own. */
export interface Subject {
  form: PricedForm | null;
  title: string;
  alloy: AlloyRate;
  family: Family;
  massesG: Masses;
  longestMm: number;
  blade: boolean;
}

function refuseField(field: string, message: string) {
  return refuse('invalid', message, { [field]: message });
}

function formMasses(form: PricedForm, alloy: AlloyRate, request: EstimateRequest, rates: EstimateRates): Masses {
  const own = findAlloy(rates, form.alloy) ?? alloy;
  const ratio = sizeRatios(form, request).mass * (alloy.densityGPerCm3 / own.densityGPerCm3);
  const of = (massG: number) => Math.max(1, halfUp(massG * ratio));
  return { finished: of(form.massesG.finished), cast: of(form.massesG.cast), poured: of(form.massesG.poured) };
}

function formSubject(request: EstimateRequest, { rates, forms }: RateCard): Outcome<Subject> {
  const form = forms.find(({ slug }) => slug === request.form);
  if (!form)
    return refuseField('form', 'We do not know that form. Choose one from the list, or describe a piece of your own.');
  const code = request.alloy ?? form.alloy;
  const alloy = findAlloy(rates, code);
  if (!alloy || !form.alloys.includes(code)) {
    return refuseField('alloy', `We do not cast this form in that alloy. Choose from ${form.alloys.join(', ')}.`);
  }
  if (request.haft && request.haft !== 'none' && !form.haft.some(({ code: haft }) => haft === request.haft)) {
    return refuseField('haft', 'We do not fit that to this form. Choose from the list, or leave it without.');
  }
  const family = findFamily(rates, form.family);
  if (!family)
    return refuse(
      'unavailable',
      'The studio has no pours on record for this form. Write to us and we will reckon it by hand.',
    );
  return done({
    form,
    title: form.name,
    alloy,
    family,
    massesG: formMasses(form, alloy, request, rates),
    longestMm: request.lengthMm ?? form.dimensionsMm.length,
    blade: form.bladed && form.kind === 'blade',
  });
}

function ownSubject(request: EstimateRequest, { rates }: RateCard): Outcome<Subject> {
  const alloy = request.alloy ? findAlloy(rates, request.alloy) : rates.alloys[0];
  if (!alloy) return refuseField('alloy', 'We do not cast that alloy. Choose one of ours.');
  const family = findFamily(rates, ownFamilyCode(request, rates)) ?? rates.families[0];
  if (!family)
    return refuse('unavailable', 'The studio has no pours on record. Write to us and we will reckon it by hand.');
  return done({
    form: null,
    title: request.description?.trim().slice(0, 120) || 'A piece of your own',
    alloy,
    family,
    massesG: ownMasses(request, alloy, family, rates),
    longestMm: request.longestMm ?? 0,
    blade: request.bladed,
  });
}

/** Finds what the request is about, or says which field to change. */
export function findSubject(request: EstimateRequest, card: RateCard): Outcome<Subject> {
  const { rates } = card;
  const found = request.what === 'form' ? formSubject(request, card) : ownSubject(request, card);
  if (!found.ok) return found;
  if (request.finish && !findRoute(rates.finishes, request.finish))
    return refuseField('finish', 'We do not know that finish. Choose one from the list.');
  if (request.edge && !findRoute(rates.edges, request.edge))
    return refuseField('edge', 'We do not know that edge. Choose one from the list.');
  if (request.currency !== rates.currency && !rates.currencies[request.currency]) {
    return refuseField(
      'currency',
      `We quote in ${[rates.currency, ...Object.keys(rates.currencies)].join(', ')}. Choose one of these.`,
    );
  }
  if (found.value.massesG.poured > rates.largestPourG) {
    const most = rates.largestPourG.toLocaleString('en-GB');
    const field = request.what === 'own' ? 'massG' : 'lengthMm';
    return refuseField(
      field,
      `This piece needs more metal than our largest pour of ${most} g. Make it smaller, or write to us about casting it in parts.`,
    );
  }
  return found;
}

/** What the buyer gets, one sentence each. */
function specification(request: EstimateRequest, { form, alloy }: Subject, rates: EstimateRates): string[] {
  const finish = findRoute(rates.finishes, request.finish ?? form?.work.finish ?? 'polished');
  const edged = form ? form.intendedEdges.length > 0 : request.bladed;
  const edge = edged ? findRoute(rates.edges, request.edge ?? form?.work.edge ?? rates.edges[0]?.code) : undefined;
  const code = chosenHaft(request, form);
  const haft = form?.haft.find((option) => option.code === code)?.name ?? (code ? 'Haft or handle fitted' : undefined);
  return [alloy.plainName, finish?.name, edge && `Edge: ${edge.name.toLowerCase()}`, haft].filter(
    (words) => words !== undefined,
  );
}

/** Weeks from deposit. A rushed piece does not stand in the queue. */
function weeksFor(
  lines: readonly CostLine[],
  pieces: number,
  rates: EstimateRates,
  chanceOfRepour: number,
  rush: boolean,
) {
  const hand = sumHand(
    lines.filter(({ group }) => group === 'hand'),
    pieces,
    rates.pricing.repeatFactor,
  );
  const throughput = rush ? { ...rates.throughput, queuedHours: 0 } : rates.throughput;
  return dateRange(throughput, hand.minutes / 60, chanceOfRepour);
}

function rushFor(request: EstimateRequest, massesG: Masses, rates: EstimateRates): Rush | null {
  if (!request.rush) return null;
  return {
    heatMinor: heatMinor(rates),
    heats: Math.max(1, Math.ceil((request.pieces * massesG.poured) / rates.largestPourG)),
  };
}

/** The draft before carriage is known, which depends on what the parcel is worth. */
function draftWithoutCarriage(request: EstimateRequest, subject: Subject, rates: EstimateRates): QuoteDraft {
  const { form, alloy, family, massesG } = subject;
  const metal = {
    code: alloy.code,
    name: alloy.plainName,
    ingotMinorPerKg: alloy.ingotMinorPerKg,
    returnsMinorPerKg: alloy.returnsMinorPerKg,
    meltLoss: alloy.meltLoss,
  };
  const work = form ? formLines(form, request, rates, alloy.contraction) : ownLines(request, alloy, rates);
  const lines = [...work, ...metalLines(massesG, metal, heatMinor(rates), rates.planningLoadG)];
  const belief = soundnessOf(family, rates.pricing.priorPours);
  const foreign = request.currency === rates.currency ? undefined : rates.currencies[request.currency];
  const home = carriageZone(rates, request.destination).tax === 'home';
  return {
    title: request.pieces > 1 ? `${request.pieces} × ${subject.title}` : subject.title,
    specification: specification(request, subject, rates),
    form: form?.slug ?? null,
    pieces: request.pieces,
    ratesVersion: rates.version,
    metal,
    massesG,
    massTolerance: rates.massTolerance,
    lines,
    soundness: { family: family.code, familyName: family.name, ...belief },
    hand: family.hand,
    lateShare: family.lateShare,
    pricing: rates.pricing,
    rush: rushFor(request, massesG, rates),
    carriage: { minor: 0, words: '' },
    currency: {
      studio: rates.currency,
      quoted: request.currency,
      rate: foreign?.rate ?? 1,
      buffer: foreign?.buffer ?? 0,
    },
    tax: {
      kind: home ? 'standard' : 'export',
      rate: rates.vatRate,
      shown: home && request.buyer === 'consumer' ? 'inclusive' : 'exclusive',
    },
    price: { kind: 'firm' },
    shownRange: null,
    outOfRangeReason: null,
    validityDays: rates.pricing.validityDays,
    includedRounds: rates.includedRounds,
    dateRange: weeksFor(lines, request.pieces, rates, 1 - failureChance(0, request.pieces, belief), request.rush),
    termsVersion: '',
    mark: 'The studio’s mark, year and code',
  };
}

/** A priceable draft from a request: every line at the studio's usual figures, carriage by what the priced work is worth. */
export function draftForRequest(request: EstimateRequest, subject: Subject, rates: EstimateRates): QuoteDraft {
  const draft = draftWithoutCarriage(request, subject, rates);
  const { workMinor } = priceQuote(draft);
  const haftG = chosenHaft(request, subject.form) ? (subject.form?.work.haftMassG ?? rates.ownPiece.haftMassG) : 0;
  const carriage = carriageFor(rates, {
    country: request.destination,
    massG: request.pieces * (subject.massesG.finished + haftG),
    blade: subject.blade,
    longestMm: subject.longestMm,
    valueMinor: workMinor,
  });
  return { ...draft, carriage };
}
