import { differenceWords, weeksWords } from '../../commission/pricing/shown-price';
import { Money } from '../ui/Money';
import { changeText } from './price-start';
import { usePriceState } from './price-context';

/** Why the price is what it is: what it rests on, what would lower it. */
export function Reasons() {
  const { estimate } = usePriceState();
  if (!estimate) return null;
  return (
    <div className="price-reasons">
      <section aria-labelledby="rests-on">
        <h2 id="rests-on">What this rests on</h2>
        <Sentences sentences={estimate.assumptions} />
      </section>
      <section aria-labelledby="cheaper">
        <h2 id="cheaper">What would make it cheaper</h2>
        <Levers />
      </section>
    </div>
  );
}

/** What follows from the price, under its panel: how it is paid, when it is sent, what may raise it. */
export function PriceAfter() {
  const { estimate } = usePriceState();
  if (!estimate) return null;
  return (
    <div className="price-after">
      <section aria-labelledby="paid">
        <h2 id="paid">How it is paid, and when it is sent</h2>
        <Payments />
      </section>
      <section aria-labelledby="risky">
        <h2 id="risky">What makes it risky</h2>
        {estimate.risks.length > 0 ? (
          <Sentences sentences={estimate.risks} />
        ) : (
          <p className="mt-3">Little: we have poured many like it, and nearly all were sound.</p>
        )}
      </section>
    </div>
  );
}

function Sentences({ sentences }: { sentences: readonly string[] }) {
  return (
    <ul className="rows mt-3">
      {sentences.map((sentence) => (
        <li key={sentence}>{sentence}</li>
      ))}
    </ul>
  );
}

/** Changes to press; each sets the inputs it names. */
function Levers() {
  const { estimate, live, change } = usePriceState();
  if (!estimate) return null;
  if (estimate.levers.length === 0)
    return <p className="mt-3">Nothing we could name: it is the plainest way already.</p>;
  return (
    <ul className="rows mt-3">
      {estimate.levers.map((lever) => (
        <li key={lever.id}>
          <button
            type="submit"
            name="lever"
            value={lever.id}
            className="lever"
            onClick={(event) => {
              if (!live) return;
              event.preventDefault();
              change(changeText(lever.change));
            }}
          >
            <span>{lever.label}</span>{' '}
            <span className="amount">{differenceWords(estimate, lever.differenceMinor)}</span>
          </button>
        </li>
      ))}
    </ul>
  );
}

/** The stage payments and the date range. */
function Payments() {
  const { estimate } = usePriceState();
  if (!estimate) return null;
  const { stages, currency, pricesShown } = estimate;
  return (
    <>
      <table className="mt-3">
        <caption className="sr-only">Payments at the lower end of the range, carriage in the last</caption>
        <tbody>
          {stages.map((stage) => (
            <tr key={stage.id}>
              <th scope="row">{stage.label}</th>
              <td className="amount">
                <Money minor={pricesShown === 'inclusive' ? stage.grossMinor : stage.netMinor} currency={currency} />
              </td>
            </tr>
          ))}
        </tbody>
      </table>
      <p className="mt-3">
        {weeksWords(estimate)} from the first payment to the day it is sent. The later end is what we promise; the
        earlier is what a good run would allow.
      </p>
    </>
  );
}
