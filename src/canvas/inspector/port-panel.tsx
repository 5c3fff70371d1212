import { CellGrid, ReadCell } from '../../components/cell.tsx';
import type { ElementRef } from '../../engine/model/design.ts';
import { portKey } from '../../engine/network/network.ts';
import { useNetwork } from './carried-segments.tsx';
import { ElementLink, ElementList } from './element-link.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { Plugged, PortFields } from './port-fields.tsx';
import { Section } from './section.tsx';

/** One port of a device: what is plugged in, its values, and who takes frames from it. */
export function PortPanel({
  id,
  port,
  member,
}: {
  readonly id: string;
  readonly port: string;
  readonly member?: 1 | 2;
}) {
  const network = useNetwork();
  const ref: ElementRef = { collection: 'devices', id, port, ...(member === undefined ? {} : { member }) };
  const forwarders = [
    ...new Set((network.circuitsByPort.get(portKey(id, port)) ?? []).map(({ forwarder }) => forwarder)),
  ];
  return (
    <>
      <PanelHead of={ref} />
      <CellGrid>
        <ReadCell label="Device">
          <ElementLink to={{ collection: 'devices', id }} />
        </ReadCell>
      </CellGrid>
      <FindingBoxes about={{ collection: 'devices', id, port }} />
      <Section title="Plugged in">
        <Plugged device={id} port={port} />
      </Section>
      <Section title="Settings">
        <PortFields device={id} port={port} />
      </Section>
      {forwarders.length > 0 && (
        <Section title="Forwarded by">
          <ElementList
            of={forwarders.map((forwarder) => ({ collection: 'forwarders', id: forwarder }))}
            empty=""
          />
        </Section>
      )}
    </>
  );
}
