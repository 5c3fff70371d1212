import { Button } from '../../components/button.tsx';
import { CellGrid } from '../../components/cell.tsx';
import type { Entry } from '../../engine/model/design.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { AddButton } from './add-button.tsx';
import { SelectField, TextField, YesNoField } from './fields.tsx';
import { Section } from './section.tsx';
import { useAt, useCommit, useEditable } from './use-field.ts';
import { textList, wholeNumber } from '../../lib/written-value.ts';

const number = wholeNumber();
const bytes = wholeNumber('B');

/** The address that a bridge's device has on the segment, if it routes for it. */
export function GatewayInterface({ id, of }: { readonly id: string; readonly of: string }) {
  const path = ['forwarders', id, 'gateway'];
  const gateway = useAt<NonNullable<Entry<'forwarders'>['gateway']>>(path);
  const editable = useEditable();
  const commit = useCommit();
  const label = `Inside interface of ${of}`;
  const at = (...field: string[]) => [...path, ...field];
  return (
    <Section title="Inside interface" open={gateway !== undefined} about={[path]}>
      {gateway === undefined ? (
        <>
          <p className="text-note text-ink-3">The device has no address on this segment.</p>
          {editable && (
            <AddButton onClick={() => commit(label, patchAt(path, {}))}>Give it an interface</AddButton>
          )}
        </>
      ) : (
        <>
          <CellGrid columns={2}>
            <TextField label="Addresses" path={at('addresses')} writing={textList} span={2} />
            <TextField label="MTU" path={at('mtu')} writing={bytes} />
            <SelectField
              label="DHCP"
              path={at('dhcp')}
              choices={[
                { value: 'none', label: 'none' },
                { value: 'server', label: 'server' },
                { value: 'relay', label: 'relay' },
              ]}
            />
            <YesNoField
              label="Router advertisements"
              path={at('routerAdvertisements')}
              words={['sent', 'not sent']}
              span={2}
            />
            {gateway.redundancy !== undefined && (
              <>
                <TextField
                  label="Redundancy group"
                  path={at('redundancy', 'group')}
                  writing={number}
                  required
                />
                <TextField label="Priority" path={at('redundancy', 'priority')} writing={number} />
                <TextField label="Shared address" path={at('redundancy', 'address')} span={2} />
              </>
            )}
          </CellGrid>
          {editable && (
            <div className="flex flex-wrap gap-6">
              {gateway.redundancy === undefined ? (
                <AddButton onClick={() => commit(label, patchAt(at('redundancy'), { group: 1 }))}>
                  Add first-hop redundancy
                </AddButton>
              ) : (
                <Button kind="quiet" small onClick={() => commit(label, patchAt(at('redundancy'), null))}>
                  Remove first-hop redundancy
                </Button>
              )}
              <Button kind="quiet" small onClick={() => commit(label, patchAt(path, null))}>
                Remove the interface
              </Button>
            </div>
          )}
        </>
      )}
    </Section>
  );
}
