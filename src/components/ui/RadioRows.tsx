import type { ReactNode } from 'react';
import type { UseFormRegisterReturn } from 'react-hook-form';
import { fieldIds } from './field-ids';
import { Swatch } from './Swatch';

export interface RadioRow {
  value: string;
  name: string;
  note?: ReactNode;
  /** What this row does to the price, already in words: "−40". Gives way to "Chosen" on the chosen row. */
  amount?: string;
  /** An alloy's own colour: draws its swatch before the name. */
  colour?: string;
  disabled?: boolean;
}

export interface RadioRowsProps {
  legend: ReactNode;
  name: string;
  rows: readonly RadioRow[];
  value?: string;
  hint?: ReactNode;
  error?: string;
  required?: boolean;
  /** From react-hook-form's `register(name)`; leave out in a plain form. */
  registration?: UseFormRegisterReturn;
}

/** Choose one of several rows; each has its name, a note and perhaps a swatch and an amount. */
export function RadioRows(props: RadioRowsProps) {
  const { hintId, errorId, describedBy } = fieldIds(props.name, props.hint, props.error);
  return (
    <fieldset className="radio-rows" aria-describedby={describedBy} id={props.name}>
      <legend className="label mb-1.5">{props.legend}</legend>
      {props.hint && (
        <p className="hint mb-1.5" id={hintId}>
          {props.hint}
        </p>
      )}
      {props.rows.map((row) => (
        <label key={row.value}>
          <input
            type="radio"
            name={props.name}
            value={row.value}
            defaultChecked={row.value === props.value}
            required={props.required}
            disabled={row.disabled}
            {...props.registration}
          />
          {row.colour ? <Swatch colour={row.colour} /> : <span className="w-1" />}
          <span>
            <span className="row-name block">{row.name}</span>
            {row.note && <span className="hint block">{row.note}</span>}
          </span>
          <span className="amount text-small">
            {row.amount && <span className="row-amount">{row.amount}</span>}
            <span className="row-chosen" aria-hidden="true">
              Chosen
            </span>
          </span>
        </label>
      ))}
      {props.error && (
        <p className="error mt-1.5" id={errorId}>
          {props.error}
        </p>
      )}
    </fieldset>
  );
}
