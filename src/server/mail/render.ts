import type { Config } from '../config';
import type { LetterData, Picture } from './letter-data';
import type { LetterId } from './letter-ids';
import type { StudioFacts } from './studio-facts';

/** What every letter knows beside its own data. */
export interface Frame {
  studio: StudioFacts;
  /** Origin of all links. */
  publicUrl: string;
  /** Photos that travel inside this mail; others are told by their caption alone. */
  enclosed: readonly string[];
}

/** A letter ready to be sent. */
export interface RenderedLetter {
  subject: string;
  html: string;
  text: string;
}

/**
 * Writes one letter as HTML and as text. The same data and frame give the same bytes, so that a second try
 * under one idempotency key carries the same mail. The letters are loaded at first use: it takes half a second.
 */
export async function renderLetter<L extends LetterId>(
  id: L,
  data: LetterData[L],
  frame: Frame,
): Promise<RenderedLetter> {
  const { writeLetter } = await import('./letters/letters');
  return writeLetter(id, data, frame);
}

/** The frame of letters of this studio. */
export function frameFor(config: Config, studio: StudioFacts, enclosed: readonly string[] = []): Frame {
  return { studio, publicUrl: config.publicUrl, enclosed };
}

/** The pictures that a letter's data names, in order. */
export function picturesOf(data: object): Picture[] {
  if ('pictures' in data && Array.isArray(data.pictures)) return data.pictures as Picture[];
  if ('picture' in data && data.picture) return [data.picture as Picture];
  return [];
}
