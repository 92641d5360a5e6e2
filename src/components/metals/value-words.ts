import { freezingGroup, freezingRangeC, type Alloy, type Band } from '../../casting/alloys';

const trimmed = (value: number, digits: number) => String(Number(value.toFixed(digits)));

/** A band as words, "1.3–1.5"; one number when both ends are the same at that many digits. */
export function bandWords(band: Band, digits = 0): string {
  const [low, high] = [trimmed(band.low, digits), trimmed(band.high, digits)];
  return low === high ? low : `${low}–${high}`;
}

/** Solidus to liquidus, "840–1000 °C". */
export function meltingWords(alloy: Pick<Alloy, 'solidusC' | 'liquidusC'>): string {
  return `${alloy.solidusC.value}–${alloy.liquidusC.value} °C`;
}

/** How it freezes, in a phrase with its width. */
export function freezingWords(alloy: Pick<Alloy, 'solidusC' | 'liquidusC'>): string {
  return `${freezingGroup(alloy)}, ${freezingRangeC(alloy)} °C wide`;
}

/** Linear shrinkage, or what to do without a figure. */
export function shrinkageWords(alloy: Pick<Alloy, 'shrinkagePct'>): string {
  return alloy.shrinkagePct ? `${bandWords(alloy.shrinkagePct.value, 1)} %` : 'not known: try first';
}

/** Pouring temperatures for light and heavy pieces. */
export function pourWords({ light, heavy, all }: Alloy['pourC']['value']): string {
  if (all) return `${bandWords(all)} °C`;
  return [light && `light pieces ${bandWords(light)} °C`, heavy && `heavy pieces ${bandWords(heavy)} °C`]
    .filter(Boolean)
    .join(', ');
}

/** What a text says beside its references: pieces of words and source keys, from "softens {key}". */
export function withReferences(text: string): ({ words: string } | { key: string })[] {
  return text
    .split(/\s*(\{\w+\})/)
    .filter((part) => part !== '')
    .map((part) => (part.startsWith('{') ? { key: part.slice(1, -1) } : { words: part }));
}

/** The words alone, for a place without room for references. */
export function withoutReferences(text: string): string {
  return text.replace(/\s*\{\w+\}/g, '');
}

/** Source keys a page of this alloy refers to, each once, in the order of the list. */
export function sourcesOf(alloy: Alloy, order: readonly string[]): string[] {
  const text = JSON.stringify(alloy);
  return order.filter((key) => text.includes(`"source":"${key}"`) || text.includes(`{${key}}`));
}
