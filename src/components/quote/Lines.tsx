import type { Estimate } from '../../commission/pricing/pricing-results';
import { Money } from '../ui/Money';
import { usePriceState } from './price-context';

/** What the piece takes, line by line, and how carriage and tax come to it. */
export function Lines() {
  const { estimate } = usePriceState();
  if (!estimate) return null;
  const { currency } = estimate;
  return (
    <table className="price-lines">
      <caption className="sr-only">What it takes, at the lower end of the range</caption>
      <thead>
        <tr>
          <th scope="col">What it takes</th>
          <th scope="col">How much</th>
          <th scope="col" className="amount">
            Cost
          </th>
        </tr>
      </thead>
      <tbody>
        {estimate.lines.map((line) => (
          <tr key={line.id}>
            <th scope="row">
              {line.label}
              {line.repeatsAtRepour && <span className="repeats"> repeats if re-poured</span>}
            </th>
            <td>{line.detail}</td>
            <td className="amount">
              <Money minor={line.amountMinor} currency={currency} />
            </td>
          </tr>
        ))}
      </tbody>
      <Sums estimate={estimate} />
    </table>
  );
}

function Sums({ estimate }: { estimate: Estimate }) {
  const { currency, carriage, fromMinor, tax, totals, pieces } = estimate;
  const each = pieces > 1 ? `${pieces} pieces` : 'one piece';
  const rows = [
    { label: 'The work', detail: each, minor: fromMinor },
    { label: 'Carriage', detail: carriage.words.replace(/^Carriage, /, ''), minor: carriage.minor },
    tax.kind === 'export'
      ? { label: 'VAT', detail: 'none, it leaves the country', minor: totals.taxMinor }
      : { label: 'VAT', detail: `${Math.round(tax.rate * 1000) / 10} %`, minor: totals.taxMinor },
    { label: 'From', detail: 'all together, at the lower end', minor: totals.grossMinor },
  ];
  return (
    <tfoot>
      {rows.map(({ label, detail, minor }) => (
        <tr key={label}>
          <th scope="row">{label}</th>
          <td>{detail}</td>
          <td className="amount">
            <Money minor={minor} currency={currency} />
          </td>
        </tr>
      ))}
    </tfoot>
  );
}
