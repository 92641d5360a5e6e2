import type { UseFormReturn } from 'react-hook-form';
import type { DeskChoices } from '../../commission/pricing/desk-choices';
import type { DeskFields } from '../../commission/pricing/desk-fields';
import { Checkbox } from '../ui/Checkbox';
import { Field } from '../ui/Field';
import { Select } from '../ui/Select';

interface DeskBasisProps {
  form: UseFormReturn<DeskFields>;
  initial: DeskFields;
  errors: Record<string, string>;
  choices: DeskChoices;
}

/** What the price is reckoned with beside the lines: metal and masses, margin, currency, tax, rush. */
export function DeskBasis({ form, initial, errors, choices }: DeskBasisProps) {
  const field = (name: 'castMassG' | 'pouredMassG' | 'margin' | 'alloy' | 'currency' | 'tax') => ({
    name,
    value: initial[name],
    error: errors[name],
    registration: form.register(name),
  });
  const tax = `${Number((choices.taxRate * 100).toFixed(1))} %`;
  return (
    <fieldset className="mt-10 grid gap-5">
      <legend className="mb-3 font-[650]">What it is reckoned with</legend>
      <div className="grid grid-cols-2 gap-4 md:grid-cols-3">
        <Select
          label="Alloy"
          options={choices.alloys.map(({ code, name }) => ({ value: code, label: `${code}, ${name}` }))}
          {...field('alloy')}
        />
        <Field label="As cast, each" unit="g" inputMode="numeric" {...field('castMassG')} />
        <Field label="Poured, each" unit="g" inputMode="numeric" {...field('pouredMassG')} />
        <Field label="Margin" unit="%" inputMode="decimal" {...field('margin')} />
        <Select
          label="Quoted in"
          options={choices.currencies.map(({ quoted, rate, buffer }) => ({
            value: quoted,
            label: rate === 1 ? quoted : `${quoted} at ${rate} and ${Number((buffer * 100).toFixed(1))} %`,
          }))}
          {...field('currency')}
        />
        <Select
          label="Tax"
          options={[
            { value: 'standard', label: `At home, ${tax}` },
            { value: 'export', label: 'Export, none' },
          ]}
          {...field('tax')}
        />
      </div>
      <Checkbox
        name="rush"
        checked={initial.rush}
        hint="A heat of its own and overtime on the hand hours; the weeks stay as typed above."
        registration={form.register('rush')}
      >
        Rush
      </Checkbox>
    </fieldset>
  );
}
