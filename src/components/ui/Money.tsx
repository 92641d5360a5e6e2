import { formatMoney, type Currency } from '../../commission/money';

export interface MoneyProps {
  /** Minor units: pence, cents. */
  minor: number;
  currency: Currency;
  /** `whole` leaves out pence that are zero. */
  pence?: 'always' | 'whole';
}

/** Money with its sign in tabular figures; line it up with the class `amount` on its cell. */
export function Money({ minor, currency, pence = 'always' }: MoneyProps) {
  return <span className="whitespace-nowrap tabular-nums">{formatMoney(minor, currency, { pence })}</span>;
}
