import type { Estimate } from '../../commission/pricing/pricing-results';
import { moneyWords, rangeWords, shownMinor, taxWords, weeksWords } from '../../commission/pricing/shown-price';
import { Distribution } from '../ui/Distribution';
import { usePriceState } from './price-context';

const UNTOLD = 'The price stands here as soon as the mass or a measured file, the longest and the thinnest are known.';

/** The price: range, what pieces like this come to, first payment, weeks, and the way to a firm quote. */
export function PricePanel() {
  const { estimate, view, untold } = usePriceState();
  const problem = view.outcome.ok ? null : untold ? UNTOLD : view.outcome.problem.message;
  return (
    <section aria-labelledby="price-heading" id="price">
      <div className="panel-dark price-panel">
        <h2 className="price-heading" id="price-heading">
          Expect to pay
        </h2>
        {problem && (
          <p className="mt-2 mb-3" role={estimate ? 'status' : undefined}>
            {estimate ? `Not yet for what stands here: ${problem}` : problem}
          </p>
        )}
        {estimate && <Figures estimate={estimate} />}
        <button className="button button-main button-wide mt-5" type="submit" name="go" value="enquire">
          Ask for a firm quote
        </button>
      </div>
      {estimate && (
        <p className="hint mt-3">
          The bars show what such pieces come to, every re-pour counted. You pay the quote, whatever the pours do. A
          range is not an offer; a quote is firm until its date.
        </p>
      )}
    </section>
  );
}

function Figures({ estimate }: { estimate: Estimate }) {
  const { pieces, bins, likelyMinor, currency, rangeMinor } = estimate;
  const shown = (minor: number) => shownMinor(estimate, minor);
  const bars = bins.map(({ fromMinor, toMinor, probability }) => ({
    from: shown(fromMinor),
    to: shown(toMinor),
    share: probability,
  }));
  const [first, last] = [bars[0], bars.at(-1)];
  const words = (minor: number) => moneyWords(estimate, Math.round(minor / 100) * 100);
  return (
    <>
      <p className="price-range">{rangeWords(estimate)}</p>
      <p className="mt-1 text-note">
        {taxWords(estimate)}, carriage apart
        {pieces > 1 &&
          `; ${words(shown(rangeMinor.low) / pieces)} to ${words(shown(rangeMinor.high) / pieces)} for each of ${pieces}`}
      </p>
      <div className="mt-4">
        <Distribution
          bars={bars}
          currency={currency}
          caption="What pieces like this come to"
          meant={{ from: 0, to: shown(likelyMinor.p80) }}
          low={first && words(first.from)}
          middle={`4 in 5 ${pieces > 1 ? 'such sets' : 'pieces like this'}: up to ${words(shown(likelyMinor.p80))}`}
          high={last && words(last.to)}
        />
      </div>
      <dl className="price-facts">
        <div>
          <dt>First payment</dt>
          <dd>{moneyWords(estimate, estimate.firstPaymentMinor)}</dd>
        </div>
        <div>
          <dt>Sent</dt>
          <dd>{weeksWords(estimate)} after it</dd>
        </div>
      </dl>
    </>
  );
}
