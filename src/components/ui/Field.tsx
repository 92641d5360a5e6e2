import type { ReactNode } from 'react';
import type { UseFormRegisterReturn } from 'react-hook-form';
import { fieldIds } from './field-ids';

export interface FieldProps {
  label: ReactNode;
  name: string;
  /** The input's id, so that an error can link to it; the name when left out. */
  id?: string;
  hint?: ReactNode;
  error?: string;
  /** What was typed before: shown again after a refusal. */
  value?: string | number;
  type?: 'text' | 'email' | 'tel' | 'number' | 'date' | 'url' | 'search';
  /** Unit written behind the figure: mm, g, hours. */
  unit?: string;
  /** A number of rows makes it a text area. */
  rows?: number;
  required?: boolean;
  /** Adds "(optional)" to the label. */
  optional?: boolean;
  disabled?: boolean;
  readOnly?: boolean;
  autoComplete?: string;
  inputMode?: 'text' | 'decimal' | 'numeric' | 'email' | 'tel';
  min?: number | string;
  max?: number | string;
  step?: number | 'any';
  maxLength?: number;
  /** From react-hook-form's `register(name)`; leave out in a plain form. */
  registration?: UseFormRegisterReturn;
}

/** One labelled input: label above, hint, input, error, all tied together for screen readers. */
export function Field(props: FieldProps) {
  const id = props.id ?? props.name;
  const { hintId, errorId } = fieldIds(id, props.hint, props.error);
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
      {props.unit ? (
        <div className="with-unit">
          <Input {...props} />
          <span className="unit">{props.unit}</span>
        </div>
      ) : (
        <Input {...props} />
      )}
      {props.error && (
        <p className="error" id={errorId}>
          {props.error}
        </p>
      )}
    </div>
  );
}

function Input(props: FieldProps) {
  const id = props.id ?? props.name;
  const given = {
    id,
    name: props.name,
    className: 'input',
    defaultValue: props.value,
    required: props.required,
    disabled: props.disabled,
    readOnly: props.readOnly,
    autoComplete: props.autoComplete,
    maxLength: props.maxLength,
    'aria-describedby': fieldIds(id, props.hint, props.error).describedBy,
    'aria-invalid': props.error ? (true as const) : undefined,
  };
  if (props.rows) return <textarea {...given} rows={props.rows} {...props.registration} />;
  return (
    <input
      {...given}
      type={props.type ?? 'text'}
      inputMode={props.inputMode}
      min={props.min}
      max={props.max}
      step={props.step}
      {...props.registration}
    />
  );
}
