import type { EstimateField } from '../../commission/estimate-fields';
import type { Choice } from '../../commission/price-view';
import { Field } from '../ui/Field';
import { Select } from '../ui/Select';
import { usePriceState } from './price-context';

/** What is done to the piece after casting: finish, edge, haft, and the hours if somebody wants to say them. */
export function Treatment() {
  const { fields, view, register, errorOf } = usePriceState();
  const { finishes, edges, hafts, form } = view.choices;
  return (
    <div className="mt-6 grid gap-4 sm:grid-cols-2 lg:grid-cols-1">
      <ChoiceList label="Finish" name="finish" choices={finishes} />
      {edges.length > 0 && <ChoiceList label="Edge" name="edge" choices={edges} />}
      {hafts.length > 0 && (
        <ChoiceList label={form?.bladed ? 'Hilt, grip or shaft' : 'Haft or handle'} name="haft" choices={hafts} />
      )}
      <Field
        label="Finishing hours"
        name="finishHours"
        unit="hours"
        inputMode="decimal"
        optional
        hint="Leave it empty for our usual hours."
        value={fields.finishHours}
        error={errorOf('finishHours')}
        registration={register('finishHours')}
      />
    </div>
  );
}

function ChoiceList({ label, name, choices }: { label: string; name: EstimateField; choices: readonly Choice[] }) {
  const { fields, register, errorOf } = usePriceState();
  return (
    <Select
      key={choices.map(({ code }) => code).join()}
      label={label}
      name={name}
      options={choices.map((choice) => ({ value: choice.code, label: choice.name }))}
      value={fields[name]}
      error={errorOf(name)}
      registration={register(name)}
    />
  );
}
