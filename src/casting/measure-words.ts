import { massG } from './mass';
import type { Measure } from './measure';
import { lengthWords, massWords } from './reader-units';

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

/** What a 3D file measures, in sentences: its box, its volume and mass when it is closed, and why not when it is not. */
export function measureWords(measure: ToldMeasure, metal?: WeighedMetal): string[] {
  const { volumeMm3, boxMm, closed, problems } = measure;
  const cubic = volumeMm3 === null ? '' : `${(volumeMm3 / 1000).toFixed(volumeMm3 < 10_000 ? 2 : 1)} cm³`;
  const inMetal =
    metal && volumeMm3 !== null
      ? `, ${massWords(massG(volumeMm3, metal.densityGPerCm3), 'metric')} in ${metal.name.toLowerCase()}`
      : '';
  return [
    `${boxWords(boxMm)}, read as millimetres.`,
    ...(closed && volumeMm3 !== null ? [`The surface is closed: ${cubic}${inMetal}.`] : []),
    ...problems,
  ];
}
