import type { EstimateRequest } from './estimate-request';
import type { PricedForm, WorkLine } from './form';

/** How much larger the wanted piece is than the studio's own: 1 is the same. */
export interface SizeRatios {
  length: number;
  area: number;
  mass: number;
  /** The size differs enough to need a new pattern. */
  changed: boolean;
}

/** Sizes closer than this are the studio's own size: a pattern is not truer than half a per cent. Studio's starting value. */
const SAME_SIZE = 0.005;

/**
 * Ratios of a form's wanted dimensions to its own. A dimension not given stays as it is. Length lines grow with the length,
 * area lines with length x width, and mass with length x width x thickness, because the outline keeps its proportions in
 * each direction.
 */
export function sizeRatios(
  form: Pick<PricedForm, 'dimensionsMm'>,
  wanted: Pick<EstimateRequest, 'lengthMm' | 'widthMm' | 'thicknessMm'>,
): SizeRatios {
  const own = form.dimensionsMm;
  const length = (wanted.lengthMm ?? own.length) / own.length;
  const width = (wanted.widthMm ?? own.width) / own.width;
  const thickness = own.thickness === undefined ? 1 : (wanted.thicknessMm ?? own.thickness) / own.thickness;
  const changed = [length, width, thickness].some((ratio) => Math.abs(ratio - 1) > SAME_SIZE);
  if (!changed) return { length: 1, area: 1, mass: 1, changed };
  return { length, area: length * width, mass: length * width * thickness, changed };
}

/** The factor on a work line's minutes and materials. */
export function lineScale(line: Pick<WorkLine, 'scalesWith'>, ratios: SizeRatios): number {
  return line.scalesWith === 'nothing' ? 1 : ratios[line.scalesWith];
}
