import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { ExportDialog } from './export-dialog.tsx';

/** Opens the dialog that takes the sheet away. */
export function ExportButton() {
  const [open, setOpen] = useState(false);
  return (
    <>
      <Button kind="primary" aria-haspopup="dialog" onClick={() => setOpen(true)}>
        Export
      </Button>
      {open && <ExportDialog onClose={() => setOpen(false)} />}
    </>
  );
}
