import type { Subject } from './estimate-draft';
import type { EstimateRequest } from './estimate-request';
import { chosenHaft, findRoute } from './form-lines';
import type { Estimate, Lever } from './pricing-results';
import type { EstimateRates } from './rates';
import { sizeRatios } from './scaling';

/** Price of the work for a changed request in the quoted currency, or null when it cannot be made. */
export type Reprice = (change: Partial<EstimateRequest>) => number | null;

interface Idea {
  id: string;
  label: string;
  change: Partial<EstimateRequest>;
}

/** Cheaper routes of one kind, one idea each. */
function routeIdeas(kind: 'finish' | 'edge', routes: EstimateRates['finishes'], current: string | undefined): Idea[] {
  const own = findRoute(routes, current);
  return routes
    .filter((route) => own && route.factor < own.factor)
    .map((route) => ({ id: `${kind}-${route.code}`, label: route.name, change: { [kind]: route.code } }));
}

/** Changes worth trying, whether or not they turn out cheaper. */
function ideasFor(request: EstimateRequest, { form }: Subject, rates: EstimateRates): Idea[] {
  const edged = form ? form.intendedEdges.length > 0 : request.bladed;
  const offered = form
    ? rates.edges.filter(({ code }) => form.intendedEdges.some((edge) => edge === code))
    : rates.edges;
  const ideas: Idea[] = [];
  if (request.finishHours === undefined) {
    const usual = form?.work.finish ?? rates.finishes.find(({ factor }) => factor === 1)?.code;
    ideas.push(...routeIdeas('finish', rates.finishes, request.finish ?? usual));
  }
  if (edged) ideas.push(...routeIdeas('edge', offered, request.edge ?? form?.work.edge ?? rates.edges[0]?.code));
  if (chosenHaft(request, form))
    ideas.push({ id: 'no-haft', label: 'Without a haft or handle', change: { haft: 'none' } });
  if (request.rush) ideas.push({ id: 'no-rush', label: 'Waiting for its place in the queue', change: { rush: false } });
  if (form && sizeRatios(form, request).changed) {
    const change = { lengthMm: undefined, widthMm: undefined, thicknessMm: undefined };
    ideas.push({ id: 'own-size', label: 'At the size of our own pattern', change });
  }
  if (request.what === 'own' && request.texture !== 'plain') {
    ideas.push({ id: 'plainer', label: 'With a plain surface', change: { texture: 'plain' } });
  }
  return ideas;
}

/** More pieces: the difference is each piece's. */
function editionIdeas(request: EstimateRequest): Idea[] {
  return [2, 3, 4, 6, 12]
    .filter((pieces) => pieces > request.pieces && pieces <= request.pieces * 3)
    .slice(0, 2)
    .map((pieces) => ({ id: `pieces-${pieces}`, label: `${pieces} pieces, for each one`, change: { pieces } }));
}

/** The changed fields as a form would send them; a field to empty becomes the empty string. */
function changeFields(change: Partial<EstimateRequest>): Lever['change'] {
  return Object.fromEntries(Object.entries(change).map(([field, value]) => [field, value ?? '']));
}

/** What would make the piece cheaper, each priced by running the whole model again; the largest saving first. */
export function cheaperLevers(
  request: EstimateRequest,
  subject: Subject,
  rates: EstimateRates,
  workMinor: number,
  reprice: Reprice,
): Lever[] {
  const whole = ideasFor(request, subject, rates).map((idea) => ({ idea, before: workMinor, per: 1 }));
  const each = editionIdeas(request).map((idea) => ({
    idea,
    before: workMinor / request.pieces,
    per: idea.change.pieces ?? 1,
  }));
  return [...whole, ...each]
    .flatMap(({ idea, before, per }) => {
      const after = reprice(idea.change);
      if (after === null) return [];
      const differenceMinor = Math.round(after / per - before);
      return [{ id: idea.id, label: idea.label, differenceMinor, change: changeFields(idea.change) }];
    })
    .filter(({ differenceMinor }) => differenceMinor < 0)
    .sort((a, b) => a.differenceMinor - b.differenceMinor);
}

/** What every other alloy offered would add or save. */
export function alloyDifferences(
  { form, alloy }: Subject,
  rates: EstimateRates,
  workMinor: number,
  reprice: Reprice,
): Estimate['alloys'] {
  return rates.alloys
    .filter(({ code }) => code !== alloy.code && (!form || form.alloys.includes(code)))
    .flatMap(({ code, plainName }) => {
      const after = reprice({ alloy: code });
      return after === null ? [] : [{ code, name: plainName, differenceMinor: after - workMinor }];
    });
}
