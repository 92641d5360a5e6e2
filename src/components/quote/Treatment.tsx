import type { EstimateField } from '../../commission/pricing/estimate-fields';
import type { Choice } from '../../commission/pricing/price-view';
import { Select } from '../ui/Select';
import { usePriceState } from './price-context';

/** What is done to the piece after casting: finish, edge and haft. */
export function Treatment() {
  const { finishes, edges, hafts, form } = usePriceState().view.choices;
  return (
    <div className="mt-6 grid gap-4 sm:grid-cols-2 lg:grid-cols-1">
      <ChoiceList label="Finish" name="finish" choices={finishes} />
      {edges.length > 0 && <ChoiceList label="Edge" name="edge" choices={edges} />}
      {hafts.length > 0 && (
        <ChoiceList label={form?.bladed ? 'Hilt, grip or shaft' : 'Haft or handle'} name="haft" choices={hafts} />
      )}
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
