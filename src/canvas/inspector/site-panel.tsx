import { CellGrid } from '../../components/cell.tsx';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { kindOf } from '../../workspace/operations/name-of.ts';
import { SegmentName, useNetwork } from './carried-segments.tsx';
import { ElementList } from './element-link.tsx';
import { LongTextField, TextField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { Section } from './section.tsx';
import { wholeNumber, textList } from '../../lib/written-value.ts';

const vlan = wholeNumber();

/** A site: the segments that land there, its devices, its notes. */
export function SitePanel({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const network = useNetwork();
  const ref = { collection: 'sites', id } as const;
  const segments = Object.entries(design.segments).filter(([, segment]) => Object.hasOwn(segment.sites, id));
  const devices = network.devicesBySite.get(id) ?? [];
  return (
    <>
      <PanelHead of={ref} namePath={['sites', id, 'name']} />
      <CellGrid>
        <TextField
          label="Security zone"
          path={['sites', id, 'zone']}
          hint="Sites of one security zone trust each other’s hosts."
        />
      </CellGrid>
      <FindingBoxes about={ref} />
      <Section title={`Segments that land here (${segments.length})`}>
        {segments.length === 0 && <p className="text-note text-ink-3">None.</p>}
        {segments.map(([segment, entry]) => (
          <div key={segment} role="group" aria-label={entry.name} className="flex flex-col gap-4">
            <SegmentName id={segment} segment={entry} />
            <CellGrid columns="minmax(0, 1fr) minmax(0, 2fr)">
              <TextField label="VLAN" path={['segments', segment, 'sites', id, 'vlan']} writing={vlan} />
              <TextField
                label="Subnets"
                path={['segments', segment, 'sites', id, 'subnets']}
                writing={textList}
              />
            </CellGrid>
          </div>
        ))}
      </Section>
      <Section title={`Devices (${devices.length})`}>
        <ElementList
          of={devices.map((device) => ({ collection: 'devices', id: device }))}
          empty="None yet."
          detail={(device) => kindOf(design, device)}
        />
      </Section>
      <Section title="Notes" open={design.sites[id]?.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={['sites', id, 'notes']} />
        </CellGrid>
      </Section>
    </>
  );
}
