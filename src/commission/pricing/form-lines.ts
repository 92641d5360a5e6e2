import { patternScale } from '../../casting/mass';
import { type CostLine, costLine } from './cost-lines';
import type { EstimateRequest } from './estimate-request';
import type { PricedForm, WorkLine } from './form';
import { halfUp } from '../money';
import type { EstimateRates } from './rates';
import { lineScale, sizeRatios, type SizeRatios } from './scaling';

/** A finish or edge by code; undefined when the studio does not offer it. */
export function findRoute(routes: EstimateRates['finishes'], code: string | undefined) {
  return routes.find((route) => route.code === code);
}

/** Time in words: 95 minutes is "1 h 35 min". */
export function timeWords(minutes: number): string {
  const [hours, rest] = [Math.floor(minutes / 60), minutes % 60];
  return [hours > 0 ? `${hours} h` : '', rest > 0 || hours === 0 ? `${rest} min` : ''].filter(Boolean).join(' ');
}

/** The haft a request comes out with: 'none' is without, nothing asked is the form's usual one. */
export function chosenHaft(request: Pick<EstimateRequest, 'haft'>, form: PricedForm | null): string | null {
  if (request.haft === 'none') return null;
  return request.haft ?? form?.work.haft ?? null;
}

/** Factor and added materials of the wanted finish or edge against the one the form was reckoned for. */
function routeChange(line: WorkLine, form: PricedForm, request: EstimateRequest, rates: EstimateRates) {
  if (line.role !== 'finish' && line.role !== 'edge') return { factor: 1, extraMinor: 0 };
  const [routes, usual, wanted] =
    line.role === 'finish'
      ? [rates.finishes, form.work.finish, request.finish]
      : [rates.edges, form.work.edge, request.edge];
  const own = findRoute(routes, usual);
  const asked = findRoute(routes, wanted) ?? own;
  if (!own || !asked || own.factor === 0) return { factor: 1, extraMinor: 0 };
  return { factor: asked.factor / own.factor, extraMinor: asked.extraMaterialsMinor - own.extraMaterialsMinor };
}

function drawnLine(
  line: WorkLine,
  ratios: SizeRatios,
  form: PricedForm,
  request: EstimateRequest,
  rates: EstimateRates,
): CostLine {
  const scale = lineScale(line, ratios);
  const { factor, extraMinor } = routeChange(line, form, request, rates);
  const override =
    line.role === 'finish' && request.finishHours !== undefined ? halfUp(request.finishHours * 60) : null;
  const minutes = override ?? halfUp(line.minutes * scale * factor);
  const hand = line.group === 'hand';
  return costLine({
    id: line.id,
    label: line.label,
    group: line.group,
    minutes,
    rateMinorPerHour: line.rate === 'desk' ? rates.deskRateMinorPerHour : rates.benchRateMinorPerHour,
    materialsMinor: Math.max(0, halfUp(line.materialsMinor * scale) + extraMinor),
    driver: override === null ? (minutes > 0 ? timeWords(minutes) : 'materials') : 'hours as asked for',
    per: line.per,
    takesRepeatFactor: hand && line.role !== 'haft',
    lostWhenLate: line.role === 'fettle',
    zeroReason: override === 0 ? 'No finishing hours were asked for.' : null,
  });
}

/**
 * Cost lines of a catalogue form as asked for; the metal lines are apart, because they come from the
 * masses. `contraction` is the alloy's, linear.
 */
export function formLines(
  form: PricedForm,
  request: EstimateRequest,
  rates: EstimateRates,
  contraction: number,
): CostLine[] {
  const ratios = sizeRatios(form, request);
  const wanted = form.work.lines.filter((line) => line.role !== 'haft' || chosenHaft(request, form) !== null);
  const lines = wanted.map((line) => drawnLine(line, ratios, form, request, rates));
  if (!ratios.changed) return lines;
  const { minutes, materialsMinor } = form.work.newPattern;
  const pattern = costLine({
    id: 'new-pattern',
    label: 'Pattern at the size you want',
    group: 'before-gate',
    minutes: halfUp(minutes * ratios.area),
    rateMinorPerHour: rates.benchRateMinorPerHour,
    materialsMinor: halfUp(materialsMinor * ratios.area),
    driver: `made ${((patternScale(contraction) - 1) * 100).toFixed(1)} % over size for the metal’s contraction`,
  });
  return [pattern, ...lines];
}
