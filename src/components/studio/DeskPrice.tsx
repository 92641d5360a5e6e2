import type { UseFormReturn } from 'react-hook-form';
import type { DeskFields } from '../../commission/pricing/desk-fields';
import { formatMoney } from '../../commission/money';
import type { PricedQuote } from '../../commission/pricing/pricing-results';
import { Field } from '../ui/Field';
import { RadioRows } from '../ui/RadioRows';

interface DeskPriceProps {
  form: UseFormReturn<DeskFields>;
  initial: DeskFields;
  errors: Record<string, string>;
  priced: PricedQuote | null;
}

/** Which price is asked: the reckoned firm one, the safer one, or the owner's own with its reason. */
export function DeskPrice({ form, initial, errors, priced }: DeskPriceProps) {
  const money = (minor: number | undefined) =>
    minor === undefined || !priced ? undefined : formatMoney(minor, priced.studio, { pence: 'whole' });
  return (
    <div className="mt-6 grid gap-4">
      <RadioRows
        legend="Price for the work"
        name="price"
        value={initial.price}
        error={errors['price']}
        registration={form.register('price')}
        rows={[
          { value: 'firm', name: 'Firm', note: money(priced?.prices.firmMinor) },
          { value: 'p80', name: 'Covers 4 in 5', note: money(priced?.prices.p80Minor) },
          { value: 'own', name: 'My own', note: 'With a reason, kept with the quote' },
        ]}
      />
      <div className="own-price">
        <Field
          label="My own price"
          name="ownMinor"
          unit={priced?.studio ?? 'GBP'}
          inputMode="decimal"
          value={initial.ownMinor}
          error={errors['ownMinor']}
          registration={form.register('ownMinor')}
        />
        <Field
          label="Why"
          name="ownReason"
          value={initial.ownReason}
          error={errors['ownReason']}
          registration={form.register('ownReason')}
        />
      </div>
    </div>
  );
}
