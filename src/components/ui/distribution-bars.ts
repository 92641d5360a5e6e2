/** One class of a distribution: costs from `from` up to `to` minor units, with this share of all outcomes. */
export interface Bar {
  from: number;
  to: number;
  share: number;
}

export interface DrawnBar {
  x: number;
  width: number;
  height: number;
  className: 'bar' | 'bar-meant' | 'bar-loss';
}

const GAP = 0.6;
const TALLEST = 38;

/**
 * Places bars on a field 100 wide and 40 high. A bar that the price cuts through is drawn in two parts, so that the
 * loss colour begins exactly at the line. A bar belongs to the meant stretch when its middle does.
 */
export function splitBars(
  bars: readonly Bar[],
  { price, meant }: { price?: number; meant?: { from: number; to: number } },
): { bars: DrawnBar[]; line: number | null } {
  const first = bars[0];
  const last = bars[bars.length - 1];
  if (!first || !last || last.to <= first.from) return { bars: [], line: null };
  const tallest = Math.max(...bars.map((bar) => bar.share), Number.MIN_VALUE);
  const at = (minor: number) => Math.min(100, Math.max(0, ((minor - first.from) / (last.to - first.from)) * 100));
  const drawn = bars.flatMap((bar): DrawnBar[] => {
    const height = (bar.share / tallest) * TALLEST;
    const cut = price === undefined ? bar.to : Math.min(bar.to, Math.max(bar.from, price));
    const middle = (bar.from + bar.to) / 2;
    const safe = meant && middle >= meant.from && middle <= meant.to ? 'bar-meant' : 'bar';
    const parts: DrawnBar[] = [
      { x: at(bar.from), width: at(cut) - at(bar.from), height, className: safe },
      { x: at(cut), width: at(bar.to) - at(cut), height, className: 'bar-loss' },
    ];
    const visible = parts.filter((part) => part.width > 0);
    const end = visible[visible.length - 1];
    if (end) end.width = Math.max(0.1, end.width - GAP);
    return visible;
  });
  return { bars: drawn, line: price === undefined || price < first.from || price > last.to ? null : at(price) };
}
