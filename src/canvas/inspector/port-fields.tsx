import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { DeepReadonly } from '../../engine/model/design.ts';
import type { Port } from '../../engine/model/devices.ts';
import { joinPatches, patchAt } from '../../engine/model/merge-patch.ts';
import { isTrunk } from '../../engine/network/frame-tags.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { useNetwork } from './carried-segments.tsx';
import { ConnectButton } from './connect-button.tsx';
import { ElementLink } from './element-link.tsx';
import { FlagField, SelectField, TextField } from './fields.tsx';
import { socketsOf } from './port-words.ts';
import { rate } from '../../lib/rate-text.ts';
import { useAt, useCommit } from './use-field.ts';
import { allowedVlans } from './vlan-list.ts';
import { wholeNumber } from '../../lib/written-value.ts';

const number = wholeNumber();
const bytes = wholeNumber('B');
const perSecond = wholeNumber('/s');
const roles = [
  { value: 'lan', label: 'LAN' },
  { value: 'wan', label: 'WAN' },
  { value: 'member-link', label: 'member link' },
] as const;
const modes = [
  { value: 'access', label: 'access' },
  { value: 'trunk', label: 'trunk' },
] as const;
const bpduChoices = [
  { value: 'guard', label: 'BPDU guard' },
  { value: 'root-guard', label: 'root guard' },
  { value: 'filter', label: 'BPDU filter' },
] as const;

/** What is plugged into a port, with the way to the other side; a free socket offers to be joined. */
export function Plugged({ device, port }: { readonly device: string; readonly port: string }) {
  const network = useNetwork();
  const facts = network.design.devices[device]?.ports[port];
  if (facts === undefined) return null;
  const name = facts.name ?? String(facts.number);
  return (
    <ul className="flex flex-col">
      {socketsOf(network, device, port).map(({ member, link, peer }, at) => (
        <li key={`${member ?? 0}-${link ?? at}`} className="flex min-h-26 items-center gap-6 text-base">
          {member !== undefined && <span className="text-note text-ink-2">member {member}</span>}
          <span className="min-w-0 flex-1">
            {peer !== undefined ? (
              <>
                <ElementLink
                  to={{ collection: 'devices', id: peer.device, port: peer.port, member: peer.member }}
                />{' '}
                <span className="text-note text-ink-2">
                  by <ElementLink to={{ collection: 'links', id: link! }}>cable</ElementLink>
                </span>
              </>
            ) : link !== undefined ? (
              <ElementLink to={{ collection: 'links', id: link }} />
            ) : (
              <span className="text-ink-3">free</span>
            )}
          </span>
          {link === undefined && facts.shut !== true && (
            <ConnectButton
              kind={facts.role === 'wan' ? 'landing' : 'cable'}
              from={{ collection: 'devices', id: device, port, ...(member === undefined ? {} : { member }) }}
              subject={`at port ${name}${member === undefined ? '' : ` of member ${member}`}`}
            />
          )}
        </li>
      ))}
    </ul>
  );
}

/** Every value of a port. A change of role or mode removes what only the old one had. */
export function PortFields({ device, port }: { readonly device: string; readonly port: string }) {
  const path = ['devices', device, 'ports', port];
  const facts = useAt<DeepReadonly<Port>>(path);
  const design = useOpenState((state) => state.document);
  const network = useNetwork();
  const commit = useCommit();
  if (facts === undefined) return null;
  const isPair = design.devices[device]?.kind === 'ha-pair';
  const isGateway = ['firewall', 'router', 'ha-pair'].includes(design.devices[device]?.kind ?? '');
  const isPlugged = socketsOf(network, device, port).some(({ link }) => link !== undefined);
  const name = facts.name ?? String(facts.number);
  const set = (label: string, values: { readonly [field: string]: unknown }): void => {
    commit(
      `${label} of port ${name}`,
      joinPatches(
        design,
        Object.entries(values).map(([field, value]) => patchAt([...path, field], value)),
      ),
    );
  };
  const at = (field: string) => [...path, field];
  return (
    <CellGrid columns={2}>
      <TextField label="Number" path={at('number')} writing={number} required />
      <TextField label="Name" path={at('name')} emptyWord="its number" />
      {isPlugged ? (
        // What is plugged in decides: a WAN port lands, the others take cables.
        <ReadCell label="Role">{roleWord(facts)}</ReadCell>
      ) : (
        <SelectField
          label="Role"
          path={at('role')}
          required
          choices={roles.filter(
            ({ value }) =>
              value === facts.role ||
              value === 'lan' ||
              (value === 'wan' && isGateway) ||
              (value === 'member-link' && isPair),
          )}
          onChoose={(role) =>
            set('Role', {
              role,
              ...(role === 'lan'
                ? {}
                : {
                    mode: undefined,
                    vlan: undefined,
                    nativeVlan: undefined,
                    allowedVlans: undefined,
                    bpdus: undefined,
                  }),
            })
          }
        />
      )}
      <FlagField label="Shut" path={at('shut')} words={['shut', 'not shut']} />
      {facts.role === 'lan' && (
        <>
          <SelectField
            label="Mode"
            path={at('mode')}
            choices={modes}
            span={isTrunk(facts) ? 2 : 1}
            onChoose={(mode) =>
              set('Mode', {
                mode,
                ...(mode === 'access' ? { nativeVlan: undefined, allowedVlans: undefined } : {}),
                ...(mode === 'trunk' ? { vlan: undefined } : {}),
              })
            }
          />
          {isTrunk(facts) ? (
            <>
              <TextField
                label="Allowed VLANs"
                path={at('allowedVlans')}
                writing={allowedVlans}
                emptyWord="all"
                span={2}
              />
              <TextField label="Native VLAN" path={at('nativeVlan')} writing={number} emptyWord="none" />
            </>
          ) : (
            <TextField label="VLAN" path={at('vlan')} writing={number} />
          )}
        </>
      )}
      <TextField label="Speed" path={at('speedBps')} writing={rate} />
      <TextField label="MTU" path={at('mtu')} writing={bytes} />
      <TextField label="Aggregation group" path={at('aggregation')} emptyWord="none" />
      {facts.role === 'lan' && (
        <>
          <TextField
            label="Storm limit"
            path={at('stormLimitPps')}
            writing={perSecond}
            emptyWord="none stated"
          />
          <TextField label="MAC limit" path={at('macLimit')} writing={number} emptyWord="none stated" />
          <SelectField
            label="BPDUs"
            path={at('bpdus')}
            choices={bpduChoices}
            emptyWord="sent and taken"
            span={2}
          />
        </>
      )}
    </CellGrid>
  );
}

const roleWord = ({ role }: Pick<Port, 'role'>): string => roles.find(({ value }) => value === role)!.label;
