import { carriageFor } from '../commission/pricing/carriage';
import { costLine, type CostLine } from '../commission/pricing/cost-lines';
import { priceQuote } from '../commission/pricing/quote';
import type { QuoteDraft } from '../commission/pricing/quote-draft';
import { demoRates } from './rates';

const bench = demoRates.benchRateMinorPerHour;
const desk = demoRates.deskRateMinorPerHour;

function before(id: string, label: string, minutes: number, rate: number, materialsMinor = 0): CostLine {
  const driver = minutes > 0 ? 'from the scan' : 'materials';
  return costLine({ id, label, group: 'before-gate', minutes, rateMinorPerHour: rate, materialsMinor, driver });
}

const WAX_MINUTES = 90;

/** The same draft with carriage for what the work is worth. */
function withCarriage(draft: QuoteDraft): QuoteDraft {
  const parcel = { country: 'GB', massG: draft.massesG.finished, blade: false, longestMm: 135 };
  return { ...draft, carriage: carriageFor(demoRates, { ...parcel, valueMinor: priceQuote(draft).workMinor }) };
}

/**
 * The figure hilt from a museum’s scan: the form’s own draft, with a pattern made from the scan in the place of the
 * studio’s and the surface matched to photographs.
 */
export function hiltFromScan(form: QuoteDraft): QuoteDraft {
  const extra = [
    before('scan', 'Scan cleaned, scaled and checked', 240, desk),
    before('condition', 'Papers and condition report', 25, desk),
    before('print', 'Printed pattern', 0, 0, 4200),
    before('pattern-finish', 'Pattern finished to photographs', 300, bench),
    before('rubber', 'Rubber mould of its own', 150, bench, 3400),
  ];
  const match = costLine({
    id: 'finish-match',
    label: 'Surface matched to photographs',
    group: 'hand',
    minutes: 90,
    rateMinorPerHour: bench,
    driver: '1 h 30 min',
    takesRepeatFactor: true,
  });
  const own = form.lines.map((line) => (line.id === 'wax' ? { ...line, minutes: WAX_MINUTES } : line));
  return withCarriage({
    ...form,
    title: 'Dagger hilt shaped as a small figure, handling copy',
    lines: [...extra, ...own, match],
    mark: 'Reed between two dots, year and code, on the back of the waist',
  });
}

/** The revision after it: the marks cut under the foot, as the registrar asked. */
export function withMarksUnderFoot(draft: QuoteDraft): QuoteDraft {
  const marks = before('marks', 'Marks cut into the wax under the foot', 75, bench);
  return withCarriage({
    ...draft,
    lines: [marks, ...draft.lines],
    mark: 'Reed between two dots, year, code and the word “reproduction”, cut into the wax under the foot',
  });
}
