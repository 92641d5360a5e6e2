import { massG, volumeMm3 } from '../../casting/mass';
import { type CostLine, costLine } from './cost-lines';
import type { EstimateRequest } from './estimate-request';
import { chosenHaft, findRoute, timeWords } from './form-lines';
import type { Masses } from './metal-lines';
import { halfUp } from '../money';
import type { AlloyRate, Family, EstimateRates } from './rates';

/** Family of a piece without a form: its core first, then its ornament, then how thin and long it runs. */
export function ownFamilyCode(request: EstimateRequest, rates: EstimateRates): string {
  const { thinSectionMm, longPieceMm } = rates.ownPiece;
  if (request.cored) return 'cored';
  if (request.texture === 'ornate') return 'ornate';
  const thin = (request.thinnestMm ?? Infinity) < thinSectionMm || (request.longestMm ?? 0) > longPieceMm;
  return thin ? 'thin' : 'compact';
}

/** Volume of the finished piece in mm3, measured or from its mass in g and the alloy's density in g/cm3. */
export function ownVolumeMm3(request: EstimateRequest, alloy: Pick<AlloyRate, 'densityGPerCm3'>): number {
  return request.volumeMm3 ?? volumeMm3(request.massG ?? 0, alloy.densityGPerCm3);
}

/** Finished, cast and poured mass in g: the files take off the fettling allowance, the family's yield gives the gating. */
export function ownMasses(request: EstimateRequest, alloy: AlloyRate, family: Family, rates: EstimateRates): Masses {
  const measured = massG(ownVolumeMm3(request, alloy), alloy.densityGPerCm3);
  const finished = Math.max(1, halfUp(request.massG ?? measured));
  const cast = halfUp(finished * rates.ownPiece.fettlingAllowance);
  return { finished, cast, poured: halfUp(cast / family.castingYield) };
}

/**
 * Surface in dm2, estimated: a plate with mean thickness twice its thinnest section has volume / thinnest of it, and no
 * solid of that volume in a bar's or block's shape has much less than a cube. Studio's starting rule.
 */
export function ownSurfaceDm2(volume: number, thinnestMm: number): number {
  const cube = 6 * volume ** (2 / 3);
  return Math.min(Math.max(volume / thinnestMm, cube), 6 * cube) / 10_000;
}

interface Reckoning {
  surface: number;
  texture: number;
  benchMinor: number;
  deskMinor: number;
}

function preparation(
  { ownPiece: own }: EstimateRates,
  { surface, texture, benchMinor, deskMinor }: Reckoning,
): CostLine[] {
  const desk = (id: string, label: string, minutes: number) =>
    costLine({ id, label, group: 'before-gate', minutes, rateMinorPerHour: deskMinor, driver: timeWords(minutes) });
  const minutes = halfUp((own.patternMinutes + own.patternMinutesPerDm2 * surface) * texture);
  return [
    desk('intake', 'Intake, research, drawing check', own.intakeMinutes),
    desk('file', 'File or drawing made ready', own.fileRepairMinutes),
    costLine({
      id: 'pattern',
      label: 'Pattern and mould for it',
      group: 'before-gate',
      minutes,
      rateMinorPerHour: benchMinor,
      materialsMinor: own.patternMaterialsMinor + halfUp(own.rubberMaterialsMinorPerDm2 * surface),
      driver: `${timeWords(minutes)}, ${surface.toFixed(1)} dm² of surface`,
    }),
    desk('gate-a', 'Gate A: photos and answers', own.gateMinutes),
  ];
}

function attempt(
  { ownPiece: own }: EstimateRates,
  request: EstimateRequest,
  { surface, benchMinor }: Reckoning,
): CostLine[] {
  const core = request.cored ? own.coreMinutes : 0;
  const minutes = halfUp(own.mouldMinutes + own.mouldMinutesPerDm2 * surface) + core;
  const bench = (id: string, label: string, time: number, materialsMinor: number) =>
    costLine({
      id,
      label,
      group: 'attempt',
      minutes: time,
      rateMinorPerHour: benchMinor,
      materialsMinor,
      driver: timeWords(time),
    });
  return [
    bench('mould', request.cored ? 'Mould, core and gating' : 'Mould and gating', minutes, own.mouldMaterialsMinor),
    bench('break-out', 'Break-out, cut-off, first look', own.breakOutMinutes, 0),
  ];
}

function handwork(
  rates: EstimateRates,
  request: EstimateRequest,
  { surface, texture, benchMinor }: Reckoning,
): CostLine[] {
  const own = rates.ownPiece;
  const finish = findRoute(rates.finishes, request.finish) ?? rates.finishes.find(({ factor }) => factor === 1);
  const edge = request.bladed ? (findRoute(rates.edges, request.edge) ?? rates.edges[0]) : undefined;
  const finishMinutes = halfUp(
    (own.finishMinutes + own.finishMinutesPerDm2 * surface) * texture * (finish?.factor ?? 1),
  );
  const asked = request.finishHours === undefined ? null : halfUp(request.finishHours * 60);
  const edgeMinutes = halfUp((own.edgeMinutesPerDm * (request.longestMm ?? 0) * (edge?.factor ?? 0)) / 100);
  const hand = (id: string, label: string, minutes: number, rest: Partial<CostLine> = {}) =>
    costLine({
      id,
      label,
      group: 'hand',
      minutes,
      rateMinorPerHour: benchMinor,
      driver: timeWords(minutes),
      takesRepeatFactor: true,
      ...rest,
    });
  const fettleMinutes = halfUp((own.fettleMinutes + own.fettleMinutesPerDm2 * surface) * texture);
  return [
    hand('fettle', 'Fettling', fettleMinutes, { lostWhenLate: true }),
    ...(edge ? [hand('edge', `Edge: ${edge.name.toLowerCase()}`, edgeMinutes)] : []),
    hand('finish', finish?.name ?? 'Finishing', asked ?? finishMinutes, {
      materialsMinor: finish?.extraMaterialsMinor ?? 0,
      zeroReason: asked === 0 ? 'No finishing hours were asked for.' : null,
    }),
    ...(chosenHaft(request, null)
      ? [
          hand('haft', 'Haft or handle fitted', own.haftMinutes, {
            takesRepeatFactor: false,
            materialsMinor: own.haftMaterialsMinor,
          }),
        ]
      : []),
  ];
}

/** Cost lines of a piece the studio has no form for, from its surface, texture and core; the metal lines are apart. */
export function ownLines(request: EstimateRequest, alloy: AlloyRate, rates: EstimateRates): CostLine[] {
  const own = rates.ownPiece;
  const reckoning: Reckoning = {
    surface: ownSurfaceDm2(ownVolumeMm3(request, alloy), request.thinnestMm ?? own.thinSectionMm),
    texture: own.textureFactors[request.texture],
    benchMinor: rates.benchRateMinorPerHour,
    deskMinor: rates.deskRateMinorPerHour,
  };
  return [
    ...preparation(rates, reckoning),
    costLine({
      id: 'record',
      label: 'Certificate, mark, record',
      group: 'after-gate',
      minutes: own.recordMinutes,
      rateMinorPerHour: rates.deskRateMinorPerHour,
      driver: timeWords(own.recordMinutes),
      per: 'piece',
    }),
    ...attempt(rates, request, reckoning),
    ...handwork(rates, request, reckoning),
    costLine({
      id: 'abrasives',
      label: 'Abrasives, chemicals, wax',
      group: 'sundries',
      materialsMinor: own.sundriesMinor,
      driver: 'per piece',
      per: 'piece',
    }),
  ];
}
