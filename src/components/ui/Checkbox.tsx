import type { ReactNode } from 'react';
import type { UseFormRegisterReturn } from 'react-hook-form';
import { fieldIds } from './field-ids';

export interface CheckboxProps {
  name: string;
  id?: string;
  /** What is sent when it is ticked; "yes" when left out. */
  value?: string;
  checked?: boolean;
  hint?: ReactNode;
  error?: string;
  required?: boolean;
  disabled?: boolean;
  /** The words beside the box. */
  children: ReactNode;
  /** From react-hook-form's `register(name)`; leave out in a plain form. */
  registration?: UseFormRegisterReturn;
}

/** A box to tick with its words beside it. */
export function Checkbox(props: CheckboxProps) {
  const id = props.id ?? props.name;
  const { hintId, errorId, describedBy } = fieldIds(id, props.hint, props.error);
  return (
    <div className="choice">
      <input
        type="checkbox"
        id={id}
        name={props.name}
        value={props.value ?? 'yes'}
        defaultChecked={props.checked}
        required={props.required}
        disabled={props.disabled}
        aria-describedby={describedBy}
        aria-invalid={props.error ? true : undefined}
        {...props.registration}
      />
      <label htmlFor={id}>{props.children}</label>
      {props.hint && (
        <p className="hint" id={hintId}>
          {props.hint}
        </p>
      )}
      {props.error && (
        <p className="error" id={errorId}>
          {props.error}
        </p>
      )}
    </div>
  );
}
