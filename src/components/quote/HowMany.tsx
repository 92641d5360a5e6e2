import type { Currency } from '../../commission/money';
import type { Choice } from '../../commission/pricing/price-view';
import { Checkbox } from '../ui/Checkbox';
import { Field } from '../ui/Field';
import { Select } from '../ui/Select';
import { usePriceState } from './price-context';

const CURRENCY_NAMES: Record<Currency, string> = { GBP: 'Pounds sterling', EUR: 'Euros', USD: 'US dollars' };
const BUYERS = [
  { value: 'consumer', label: 'A private person' },
  { value: 'institution', label: 'A museum, company or group' },
];

/** How many pieces, where they go, in which money, for whom, with how many hours of finishing, and whether it is urgent. */
export function HowMany({ countries }: { countries: readonly Choice[] }) {
  const { fields, view, live, register, errorOf } = usePriceState();
  return (
    <div className="how-many">
      <Field
        label="Pieces, 1 to 24"
        name="pieces"
        inputMode="numeric"
        value={fields.pieces}
        error={errorOf('pieces')}
        registration={register('pieces')}
      />
      <Select
        label="Going to"
        name="destination"
        options={countries.map(({ code, name }) => ({ value: code, label: name }))}
        value={fields.destination}
        error={errorOf('destination')}
        registration={register('destination')}
      />
      <Select
        label="Currency"
        name="currency"
        options={view.choices.currencies.map((code) => ({ value: code, label: CURRENCY_NAMES[code] }))}
        value={fields.currency}
        error={errorOf('currency')}
        registration={register('currency')}
      />
      <Select
        label="Bought by"
        name="buyer"
        options={BUYERS}
        value={fields.buyer}
        error={errorOf('buyer')}
        registration={register('buyer')}
      />
      <Field
        label="Finishing, each piece"
        hint="Empty for our usual hours."
        name="finishHours"
        unit="hours"
        inputMode="decimal"
        value={fields.finishHours}
        error={errorOf('finishHours')}
        registration={register('finishHours')}
      />
      <div className="how-many-rush">
        <Checkbox
          name="rush"
          value="on"
          checked={fields.rush === 'on'}
          hint="A heat of its own and overtime at the bench."
          registration={register('rush')}
        >
          Ahead of the queue
        </Checkbox>
      </div>
      {!live && (
        <button className="button" type="submit" name="go" value="reckon">
          Reckon the price
        </button>
      )}
    </div>
  );
}
