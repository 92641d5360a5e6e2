import type { ReactNode } from 'react';
import type { WordField } from '../../commission/enquiry/enquiry-words';
import { Checkbox } from '../ui/Checkbox';
import { Field, type FieldProps } from '../ui/Field';
import { Select } from '../ui/Select';
import { useEnquiryState } from './enquiry-context';

type Named<P> = Omit<P, 'name' | 'value' | 'error' | 'registration'> & { name: WordField };

/** An input of the enquiry, with what was typed before and why it has to change. */
export function WordInput({ name, ...rest }: Named<FieldProps>) {
  const { words, errorOf, register } = useEnquiryState();
  return <Field {...rest} name={name} value={words[name]} error={errorOf(name)} registration={register(name)} />;
}

interface WordChoiceProps {
  name: WordField;
  label: string;
  choices: Record<string, string>;
  placeholder?: string;
  hint?: ReactNode;
  required?: boolean;
}

/** A choice of the enquiry from one of its lists. */
export function WordChoice({ name, label, choices, placeholder, hint, required }: WordChoiceProps) {
  const { words, errorOf, register } = useEnquiryState();
  return (
    <Select
      label={label}
      name={name}
      options={Object.entries(choices).map(([value, words]) => ({ value, label: words }))}
      placeholder={placeholder}
      hint={hint}
      required={required}
      value={words[name]}
      error={errorOf(name)}
      registration={register(name)}
    />
  );
}

/** A box of the enquiry that has to be ticked. */
export function WordTick({ name, hint, children }: { name: WordField; hint?: ReactNode; children: ReactNode }) {
  const { words, errorOf, register } = useEnquiryState();
  return (
    <Checkbox
      name={name}
      checked={words[name] === 'yes'}
      required
      hint={hint}
      error={errorOf(name)}
      registration={register(name)}
    >
      {children}
    </Checkbox>
  );
}
