import type { UseFormReturn } from 'react-hook-form';
import type { DeskFields } from '../../commission/pricing/desk-fields';
import type { Currency } from '../../commission/money';
import { Field } from '../ui/Field';

interface DeskWordsProps {
  form: UseFormReturn<DeskFields>;
  initial: DeskFields;
  errors: Record<string, string>;
  currency: Currency;
}

/** What the quote says beside its price: piece, mass, dates, carriage, mark, terms of standing. */
export function DeskWords({ form, initial, errors, currency }: DeskWordsProps) {
  const field = (name: Exclude<keyof DeskFields, 'lines' | 'rush'>) => ({
    name,
    value: initial[name],
    error: errors[name],
    registration: form.register(name),
  });
  return (
    <fieldset className="mt-10 grid gap-5">
      <legend className="mb-3 font-[650]">What the customer gets</legend>
      <Field label="Piece" {...field('title')} />
      <Field label="What it includes" hint="A plain sentence a line." rows={5} {...field('specification')} />
      <div className="grid grid-cols-2 gap-4 md:grid-cols-3">
        <Field label="Pieces" inputMode="numeric" {...field('pieces')} />
        <Field label="Target mass" unit="g" inputMode="numeric" {...field('finishedMassG')} />
        <Field label="Give or take" unit="%" inputMode="decimal" {...field('massTolerance')} />
        <Field label="Earliest" unit="weeks" inputMode="numeric" {...field('earliestWeeks')} />
        <Field label="Latest, the promise" unit="weeks" inputMode="numeric" {...field('latestWeeks')} />
        <Field label="Rounds of change" inputMode="numeric" {...field('includedRounds')} />
        <Field label="Stands for" unit="days" inputMode="numeric" {...field('validityDays')} />
        <Field label="Carriage, at cost" unit={currency} inputMode="decimal" {...field('carriageMinor')} />
      </div>
      <Field label="Carriage in words" {...field('carriageWords')} />
      <Field label="The mark and where it goes" {...field('mark')} />
      <Field
        label="Why it differs from the range"
        hint="Needed when the price lies outside the range the customer was shown. They read it."
        rows={2}
        optional
        {...field('outOfRangeReason')}
      />
    </fieldset>
  );
}
