import { massG } from './mass';
import type { Measure } from './measure';
import { lengthWords, massWords, MM_PER_INCH } from './reader-units';

/** A metal to weigh a measured file in: its name and density in g/cm3. */
export interface WeighedMetal {
  name: string;
  densityGPerCm3: number;
}

/** What is told about a measured file; the whole measure has more. */
export type ToldMeasure = Pick<Measure, 'volumeMm3' | 'boxMm' | 'closed' | 'problems'>;

const tenth = (mm: number) => Math.round(mm * 10) / 10;

/** The box around a piece: "120 × 40 × 8.5 mm (4.72 × 1.57 × 0.33 in)". */
export function boxWords(boxMm: ToldMeasure['boxMm']): string {
  const sides = (system: 'metric' | 'imperial') =>
    boxMm.map((mm) => lengthWords(tenth(mm), system).replace(/ (mm|in)$/, '')).join(' × ');
  return `${sides('metric')} mm (${sides('imperial')} in)`;
}

/** Another unit a file may have been drawn in: its name, how many mm it is, and the box it would give. */
export interface OtherUnit {
  unit: 'inches' | 'centimetres' | 'metres';
  factor: number;
  boxMm: ToldMeasure['boxMm'];
}

/** A box smaller than this looks like another unit; what the other unit makes of it has to be a size we cast. In mm. */
const SMALL_MM = 40;
const CAST_MM = [40, 1000] as const;
const UNITS = [
  { unit: 'inches', factor: MM_PER_INCH },
  { unit: 'centimetres', factor: 10 },
  { unit: 'metres', factor: 1000 },
] as const;

/** The units a small file may have been drawn in instead of millimetres, the likeliest first; none for a usual size. */
export function otherUnits(boxMm: ToldMeasure['boxMm']): OtherUnit[] {
  const longest = Math.max(...boxMm);
  if (longest >= SMALL_MM) return [];
  return UNITS.filter(({ factor }) => longest * factor >= CAST_MM[0] && longest * factor <= CAST_MM[1]).map(
    ({ unit, factor }) => ({
      unit,
      factor,
      boxMm: [tenth(boxMm[0] * factor), tenth(boxMm[1] * factor), tenth(boxMm[2] * factor)],
    }),
  );
}

function weightWords(grams: number): string {
  return grams < 1 ? 'less than 1 g' : massWords(grams, 'metric');
}

/** What a 3D file measures, in sentences: its box, its volume and mass when it is closed, and why not when it is not. */
export function measureWords(measure: ToldMeasure, metal?: WeighedMetal): string[] {
  const { volumeMm3, boxMm, closed, problems } = measure;
  const cubic = volumeMm3 === null ? '' : `${(volumeMm3 / 1000).toFixed(volumeMm3 < 10_000 ? 2 : 1)} cm³`;
  const inMetal =
    metal && volumeMm3 !== null
      ? `, ${weightWords(massG(volumeMm3, metal.densityGPerCm3))} in ${metal.name.toLowerCase()}`
      : '';
  return [
    `${boxWords(boxMm)}, read as millimetres.`,
    ...(closed && volumeMm3 !== null ? [`The surface is closed: ${cubic}${inMetal}.`] : []),
    ...problems,
  ];
}
