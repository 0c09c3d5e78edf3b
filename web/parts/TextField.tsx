import { type InputHTMLAttributes, useId } from 'react';

interface TextFieldProps extends Omit<InputHTMLAttributes<HTMLInputElement>, 'onChange' | 'value' | 'id'> {
  readonly label: string;
  readonly value: string;
  readonly onChange: (text: string) => void;
  /** Unit printed inside the right end of the field. */
  readonly unit?: string | undefined;
  readonly hint?: string | undefined;
  /** What is expected, when the value is wrong. */
  readonly message?: string | undefined;
  readonly needed?: boolean | undefined;
}

/** One labelled input with its unit, its hint, and what is expected when the value is wrong. */
export function TextField({
  label,
  value,
  onChange,
  unit,
  hint,
  message,
  needed,
  className = '',
  ...rest
}: TextFieldProps) {
  const id = useId();
  const described = [hint ? `${id}-hint` : '', message ? `${id}-message` : ''].filter((part) => part !== '').join(' ');
  return (
    <div className={`field ${className}`}>
      <label htmlFor={id}>
        {label}
        {needed && <span className="needed"> *</span>}
      </label>
      <span className="field-box">
        <input
          {...rest}
          id={id}
          value={value}
          required={needed}
          aria-invalid={message !== undefined}
          aria-describedby={described === '' ? undefined : described}
          onChange={(event) => onChange(event.target.value)}
        />
        {unit !== undefined && <span className="field-unit">{unit}</span>}
      </span>
      {message !== undefined && (
        <p className="field-message" id={`${id}-message`}>
          {message}
        </p>
      )}
      {hint !== undefined && (
        <p className="field-hint" id={`${id}-hint`}>
          {hint}
        </p>
      )}
    </div>
  );
}
