import { formatMoney, type Currency } from '../../commission/money';
import { splitBars, type Bar } from './distribution-bars';

export interface DistributionProps {
  /** Neighbouring classes from cheap to dear; bounds in minor units, shares sum to 1. */
  bars: readonly Bar[];
  currency: Currency;
  /** What the picture shows, in one sentence: its name for a screen reader. */
  caption: string;
  /** A price in minor units: drawn as a line, what costs more than it is drawn as money at risk. */
  price?: number;
  /** The stretch a figure speaks about, in minor units. */
  meant?: { from: number; to: number };
  /** Words under the bars, at the left, in the middle, at the right. */
  low?: string;
  middle?: string;
  high?: string;
}

/** What a piece may cost, as bars; the same figures stand in a table for screen readers. */
export function Distribution({ bars, currency, caption, price, meant, low, middle, high }: DistributionProps) {
  const whole = (minor: number) => formatMoney(Math.round(minor / 100) * 100, currency, { pence: 'whole' });
  const drawn = splitBars(bars, { price, meant });
  return (
    <figure>
      <svg
        className="distribution"
        viewBox="0 0 100 40"
        preserveAspectRatio="none"
        aria-hidden="true"
        focusable="false"
      >
        {drawn.bars.map((bar) => (
          <rect
            key={bar.x}
            className={bar.className}
            x={bar.x}
            y={40 - bar.height}
            width={bar.width}
            height={bar.height}
          />
        ))}
        {drawn.line !== null && (
          <line
            className="price-line"
            x1={drawn.line}
            x2={drawn.line}
            y1="0"
            y2="40"
            vectorEffect="non-scaling-stroke"
          />
        )}
      </svg>
      {(low || middle || high) && (
        <p className="faint mt-1.5 flex justify-between gap-3 text-small tabular-nums">
          <span>{low}</span>
          <span className="text-center">{middle}</span>
          <span>{high}</span>
        </p>
      )}
      <div className="sr-only">
        <table>
          <caption>{caption}</caption>
          <thead>
            <tr>
              <th scope="col">Between</th>
              <th scope="col">Share of pieces</th>
            </tr>
          </thead>
          <tbody>
            {bars.map((bar) => (
              <tr key={bar.from}>
                <th scope="row">
                  {whole(bar.from)} and {whole(bar.to)}
                </th>
                <td>{(bar.share * 100).toFixed(1)} %</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </figure>
  );
}
