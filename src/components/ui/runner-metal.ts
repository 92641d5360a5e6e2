/** Metal along the runner: cooled at the pouring end, hot where it now stands. `place` runs from 0 to 1. */
export function metalColour(place: number): string {
  const at = Math.min(1, Math.max(0, place));
  const [lightness, chroma, hue] = [0.62 + 0.08 * at, 0.095 + 0.01 * at, 62 + 6 * at];
  return `oklch(${lightness.toFixed(3)} ${chroma.toFixed(3)} ${hue.toFixed(1)})`;
}

/** The colour of metal that is still hot. */
export const HOT = 'oklch(0.7 0.19 48)';

/** How much of a hot stage's bar is filled, per cent: never less than its own gate, never all of it. */
export function filledPerCent(share: number | undefined): number {
  return Math.round(Math.min(96, Math.max(24, (share ?? 0.24) * 100)));
}
