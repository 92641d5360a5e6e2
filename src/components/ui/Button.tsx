import type { MouseEventHandler, ReactNode } from 'react';

export interface ButtonProps {
  children: ReactNode;
  /** `main` is the one main action of a page; `plain` any other; `quiet` stands back beside another; `text` reads as a link. */
  kind?: 'main' | 'plain' | 'quiet' | 'text';
  /** Given an address it is a link. */
  href?: string;
  type?: 'submit' | 'button';
  name?: string;
  value?: string;
  form?: string;
  id?: string;
  wide?: boolean;
  disabled?: boolean;
  onClick?: MouseEventHandler<HTMLButtonElement>;
}

/** A button that says what it does, or a link that looks like one. */
export function Button({ children, kind = 'plain', href, type = 'submit', wide, ...rest }: ButtonProps) {
  const shape = kind === 'text' ? 'button-text' : kind === 'plain' ? 'button' : `button button-${kind}`;
  const className = wide ? `${shape} button-wide` : shape;
  if (href) {
    return (
      <a className={className} href={href} id={rest.id}>
        {children}
      </a>
    );
  }
  return (
    <button
      className={className}
      type={type}
      name={rest.name}
      value={rest.value}
      form={rest.form}
      id={rest.id}
      disabled={rest.disabled}
      onClick={rest.onClick}
    >
      {children}
    </button>
  );
}
