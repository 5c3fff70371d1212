import { useState } from 'react';
import { InputCell } from '../../components/field-cells.tsx';
import { blockCell } from './form-block.tsx';

interface PasswordCellProps {
  readonly label: string;
  readonly value: string;
  readonly onChange: (value: string) => void;
  readonly error?: string | undefined;
  readonly focused?: boolean;
}

/** A cell for a new password, which its reader may look at. */
export function PasswordCell({ label, value, onChange, error, focused = false }: PasswordCellProps) {
  const [shown, setShown] = useState(false);
  return (
    <InputCell
      label={label}
      type={shown ? 'text' : 'password'}
      autoComplete="new-password"
      // eslint-disable-next-line jsx-a11y/no-autofocus -- only where the page is for nothing else
      autoFocus={focused}
      className={blockCell}
      value={value}
      onChange={(event) => onChange(event.target.value)}
      error={error}
      after={
        <button
          type="button"
          aria-pressed={shown}
          aria-label="Show the password"
          onClick={() => setShown(!shown)}
          className="text-base text-blue underline"
        >
          {shown ? 'Hide' : 'Show'}
        </button>
      }
    />
  );
}
