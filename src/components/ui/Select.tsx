import type { ReactNode } from 'react';
import type { UseFormRegisterReturn } from 'react-hook-form';
import { fieldIds } from './field-ids';

export interface SelectProps {
  label: ReactNode;
  name: string;
  id?: string;
  options: readonly { value: string; label: string; disabled?: boolean }[];
  value?: string;
  /** First line while nothing is chosen, such as "Choose a country". */
  placeholder?: string;
  hint?: ReactNode;
  error?: string;
  required?: boolean;
  optional?: boolean;
  disabled?: boolean;
  autoComplete?: string;
  /** From react-hook-form's `register(name)`; leave out in a plain form. */
  registration?: UseFormRegisterReturn;
}

/** One labelled choice from a list: the browser's own select. */
export function Select(props: SelectProps) {
  const id = props.id ?? props.name;
  const { hintId, errorId, describedBy } = fieldIds(id, props.hint, props.error);
  return (
    <div className="field">
      <label className="label" htmlFor={id}>
        {props.label}
        {props.optional && <span className="font-normal text-muted"> (optional)</span>}
      </label>
      {props.hint && (
        <p className="hint" id={hintId}>
          {props.hint}
        </p>
      )}
      <select
        id={id}
        name={props.name}
        className="input"
        defaultValue={props.value ?? (props.placeholder ? '' : undefined)}
        required={props.required}
        disabled={props.disabled}
        autoComplete={props.autoComplete}
        aria-describedby={describedBy}
        aria-invalid={props.error ? true : undefined}
        {...props.registration}
      >
        {props.placeholder && <option value="">{props.placeholder}</option>}
        {props.options.map((option) => (
          <option key={option.value} value={option.value} disabled={option.disabled}>
            {option.label}
          </option>
        ))}
      </select>
      {props.error && (
        <p className="error" id={errorId}>
          {props.error}
        </p>
      )}
    </div>
  );
}
