import { studioAlloy } from '../../casting/studio-alloys';
import { differenceWords } from '../../commission/pricing/shown-price';
import { RadioRows } from '../ui/RadioRows';
import { usePriceState } from './price-context';

/** The alloys offered, with what each would do to the price. */
export function AlloyRows() {
  const { fields, view, estimate, register, errorOf } = usePriceState();
  const rows = view.choices.alloys.map(({ code, name }) => {
    const alloy = studioAlloy(code);
    const difference = estimate?.alloys.find((other) => other.code === code)?.differenceMinor;
    return {
      value: code,
      name,
      note: alloy?.words,
      colour: alloy?.swatch,
      amount: estimate && difference !== undefined ? differenceWords(estimate, difference) : undefined,
    };
  });
  return (
    <RadioRows
      key={rows.map(({ value }) => value).join()}
      legend="Alloy"
      name="alloy"
      rows={rows}
      value={fields.alloy}
      error={errorOf('alloy')}
      registration={register('alloy')}
    />
  );
}
