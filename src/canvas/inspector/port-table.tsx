import { useState } from 'react';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { Menu } from '../../components/menu.tsx';
import { Shapes } from '../../components/shapes.tsx';
import { SeverityShape } from '../../components/severity-mark.tsx';
import { pipMark } from '../../drawing/parts/pips.ts';
import type { DeepReadonly, Entry } from '../../engine/model/design.ts';
import { isGateway, type Port } from '../../engine/model/devices.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { useChecks } from '../../workspace/checks-context.tsx';
import { newEntryId, useOpenState } from '../../workspace/open-design-context.tsx';
import { removeElements } from '../../workspace/operations/remove-parts.ts';
import { AddButton } from './add-button.tsx';
import { useNetwork } from './carried-segments.tsx';
import { findingsAbout } from './field-marks.ts';
import { usePerform } from './panel-head.tsx';
import { PortFields, Plugged } from './port-fields.tsx';
import { pipOf, portWords, socketsOf } from './port-words.ts';
import { Section } from './section.tsx';
import { useCommit, useEditable } from './use-field.ts';

const gigabitBps = 1_000_000_000;
const usualMtu = 1500;

/** The values that a new port starts with. */
const newPort = (device: Entry<'devices'>, role: Port['role']): DeepReadonly<Port> => ({
  number: Math.max(0, ...Object.values(device.ports).map((port) => port.number)) + 1,
  role,
  speedBps: gigabitBps,
  ...(role === 'lan' ? { mode: device.kind === 'host' ? ('access' as const) : ('trunk' as const) } : {}),
  ...(role === 'member-link' ? {} : { mtu: usualMtu }),
});

const roleLabels = { lan: 'LAN port', wan: 'WAN port', 'member-link': 'Member link' } as const;

/** A device's ports in the order of their numbers; each opens to its values. */
export function PortTable({ device: id }: { readonly device: string }) {
  const device = useOpenState((state) => state.document.devices[id]);
  const editable = useEditable();
  const commit = useCommit();
  if (device === undefined) return null;
  const ports = Object.entries(device.ports).sort(([, a], [, b]) => a.number - b.number);
  const add = (role: Port['role']): void => {
    commit(
      `Port of ${device.name}`,
      patchAt(['devices', id, 'ports', newEntryId('p')], newPort(device, role)),
    );
  };
  const roles: readonly Port['role'][] = [
    'lan',
    ...(isGateway(device) ? (['wan'] as const) : []),
    ...(device.kind === 'ha-pair' ? (['member-link'] as const) : []),
  ];
  return (
    <Section
      title={`Ports (${ports.length})`}
      beside={
        editable &&
        (roles.length === 1 ? (
          <AddButton subject="a port" onClick={() => add('lan')}>
            Add
          </AddButton>
        ) : (
          <Menu
            align="end"
            trigger={
              <Button kind="quiet" small aria-label="Add a port" icon={<Icon name="plus" size={14} />}>
                Add
              </Button>
            }
            groups={[
              { actions: roles.map((role) => ({ label: roleLabels[role], onSelect: () => add(role) })) },
            ]}
          />
        ))
      }
    >
      <ul className="border-t border-rule">
        {ports.map(([port, facts]) => (
          <PortRow key={port} device={id} port={port} facts={facts} />
        ))}
      </ul>
    </Section>
  );
}

function PortRow({
  device,
  port,
  facts,
}: {
  readonly device: string;
  readonly port: string;
  readonly facts: DeepReadonly<Port>;
}) {
  const [open, setOpen] = useState(false);
  const design = useOpenState((state) => state.document);
  const network = useNetwork();
  const editable = useEditable();
  const run = usePerform();
  const { openFindings } = useChecks();
  const ref = { collection: 'devices', id: device, port } as const;
  const worst = findingsAbout(openFindings, ref)[0];
  const cabled = socketsOf(network, device, port).some(({ link }) => link !== undefined);
  const pip = pipMark(pipOf(facts), { x: 10, y: 10 }, { cabled, shut: facts.shut === true });
  return (
    <li className="border-b border-rule py-3">
      <button
        type="button"
        aria-expanded={open}
        onClick={() => setOpen(!open)}
        className="flex min-h-24 w-full items-center gap-6 text-left text-base text-ink hover:bg-hover"
      >
        <svg aria-hidden="true" viewBox="0 0 20 20" width="20" height="20" className="shrink-0">
          <Shapes shapes={[pip]} />
        </svg>
        <span className="min-w-18 text-right text-note text-ink-2">{facts.number}</span>
        {facts.name !== undefined && <span className="font-medium">{facts.name}</span>}
        <span className="min-w-0 flex-1 text-ink-2">
          {portWords(facts)}
          {facts.shut === true && ', shut'}
        </span>
        {worst !== undefined && (
          <>
            <SeverityShape severity={worst.severity} size={12} />
            <span className="sr-only">{worst.severity}</span>
          </>
        )}
        <Icon name={open ? 'chevron-up' : 'chevron-down'} size={14} />
      </button>
      <div className="pl-26">
        <Plugged device={device} port={port} />
      </div>
      {open && (
        <div
          role="group"
          aria-label={`Port ${facts.name ?? facts.number}`}
          className="mt-4 mb-8 flex flex-col gap-8"
        >
          <PortFields device={device} port={port} />
          {editable && (
            <Button
              kind="danger"
              small
              className="self-start"
              onClick={() => run(removeElements(design, [ref]))}
            >
              Remove port {facts.name ?? facts.number}
            </Button>
          )}
        </div>
      )}
    </li>
  );
}
