import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Dialog } from '../../components/dialog.tsx';
import { deviceKinds, type DeviceKind } from '../../engine/model/devices.ts';
import { listed } from '../../engine/rules/wording.ts';
import { useOpenDesign } from '../../workspace/open-design-context.tsx';
import { deviceKindNames } from '../../workspace/operations/name-of.ts';
import { changeDeviceKind, removedBy } from './change-device-kind.ts';
import { SelectField } from './fields.tsx';
import { usePerform } from './panel-head.tsx';
import { useAt } from './use-field.ts';

/** What kind of device it is. A change that takes things away says which, and asks first. */
export function DeviceKindCell({ id }: { readonly id: string }) {
  const design = useOpenDesign();
  const run = usePerform();
  const name = useAt<string>(['devices', id, 'name']);
  const [asked, setAsked] = useState<{ readonly kind: DeviceKind; readonly goes: readonly string[] }>();
  const change = (kind: DeviceKind): void =>
    run(changeDeviceKind(design.store.getState().document, id, kind));
  const ask = (kind: DeviceKind | undefined): void => {
    if (kind === undefined) return;
    const { document } = design.store.getState();
    const operation = changeDeviceKind(document, id, kind);
    const goes = operation.ok ? removedBy(document, operation.patch) : [];
    if (goes.length === 0) change(kind);
    else setAsked({ kind, goes });
  };
  const word = asked === undefined ? '' : deviceKindNames[asked.kind];
  return (
    <>
      <SelectField
        label="Kind"
        path={['devices', id, 'kind']}
        required
        choices={deviceKinds.map((kind) => ({ value: kind, label: deviceKindNames[kind] }))}
        onChoose={ask}
      />
      <Dialog
        open={asked !== undefined}
        onOpenChange={(open) => {
          if (!open) setAsked(undefined);
        }}
        title={`${name}: change to ${word}?`}
        footer={
          <>
            <Button onClick={() => setAsked(undefined)}>Keep as it is</Button>
            <Button
              kind="danger"
              onClick={() => {
                if (asked !== undefined) change(asked.kind);
                setAsked(undefined);
              }}
            >
              Change to {word}
            </Button>
          </>
        }
      >
        <p className="text-base">
          This removes {listed(asked?.goes ?? [])}, which the new kind does not have. It can be undone.
        </p>
      </Dialog>
    </>
  );
}
