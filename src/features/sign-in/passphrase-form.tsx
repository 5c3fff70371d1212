import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { InputCell } from '../../components/field-cells.tsx';
import { FormBlock, blockCell } from './form-block.tsx';

interface PassphraseFormProps {
  readonly onSubmit: (passphrase: string) => void;
  readonly busy: boolean;
  /** What became of the last try. */
  readonly refusal?: string | undefined;
}

/** Asks a guest for the passphrase of a link. */
export function PassphraseForm({ onSubmit, busy, refusal }: PassphraseFormProps) {
  const [passphrase, setPassphrase] = useState('');
  const [tried, setTried] = useState(false);
  return (
    <FormBlock
      title="A shared plan"
      label="Passphrase of the link"
      refusal={refusal}
      onSubmit={() => {
        setTried(true);
        if (passphrase !== '') onSubmit(passphrase);
      }}
      actions={
        <Button type="submit" kind="primary" className="ml-auto" busy={busy}>
          Open
        </Button>
      }
    >
      <InputCell
        label="Passphrase"
        type="password"
        autoComplete="off"
        className={blockCell}
        value={passphrase}
        onChange={(event) => setPassphrase(event.target.value)}
        error={
          tried && passphrase === '' ? 'Empty. Whoever sent you the link has the passphrase.' : undefined
        }
      />
    </FormBlock>
  );
}
