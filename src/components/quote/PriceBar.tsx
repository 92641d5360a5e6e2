import { rangeWords, weeksWords } from '../../commission/pricing/shown-price';
import { usePriceState } from './price-context';

/** The price at the foot of a narrow screen, once the page reckons by itself; leads to the price with its reasons. */
export function PriceBar() {
  const { estimate, live } = usePriceState();
  if (!live || !estimate) return null;
  return (
    <a className="price-bar" href="#price">
      <b>{rangeWords(estimate)}</b>
      <span>{weeksWords(estimate)}</span>
    </a>
  );
}
