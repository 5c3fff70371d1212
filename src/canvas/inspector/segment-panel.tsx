import { CellGrid } from '../../components/cell.tsx';
import { Button } from '../../components/button.tsx';
import { Icon } from '../../components/icon.tsx';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import { showToast } from '../../components/toast.tsx';
import { SelectCell } from '../../components/field-cells.tsx';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import { protocols } from '../../engine/model/intent.ts';
import { patchAt } from '../../engine/model/merge-patch.ts';
import { protocolWords } from '../../engine/model/protocol-words.ts';
import { useSearchValues } from '../../lib/use-search-values.ts';
import { newEntryId, perform, useOpenDesign, useOpenState } from '../../workspace/open-design-context.tsx';
import { placeDemand } from '../../workspace/operations/place-parts.ts';
import { AddButton } from './add-button.tsx';
import { useNetwork } from './carried-segments.tsx';
import { CheckList } from './check-list.tsx';
import { milliseconds } from '../../lib/duration-text.ts';
import { ElementLink, ElementList } from './element-link.tsx';
import { LongTextField, TextField, YesNoField } from './fields.tsx';
import { FindingBoxes } from './finding-box.tsx';
import { PanelHead } from './panel-head.tsx';
import { Section } from './section.tsx';
import { useCommit, useEditable } from './use-field.ts';
import { textList, wholeNumber } from '../../lib/written-value.ts';

const number = wholeNumber();
const bytes = wholeNumber('B');

/** A segment: what it needs, where it lands, what carries it. */
export function SegmentPanel({ id }: { readonly id: string }) {
  const network = useNetwork();
  const design = useOpenState((state) => state.document);
  const segment = design.segments[id];
  if (segment === undefined) return null;
  const at = (field: string) => ['segments', id, field];
  const ref = { collection: 'segments', id } as const;
  const tunnels = [...tunnelSegments(network)]
    .filter(([, carried]) => carried.includes(id))
    .map(([tunnel]) => tunnel);
  return (
    <>
      <PanelHead of={ref} namePath={at('name')} />
      <SegmentSwatch letter={segment.letter} squarePx={21} cordPx={240} />
      <CellGrid columns={2}>
        <TextField label="Letter" path={at('letter')} required />
        <TextField label="MTU needed" path={at('mtu')} writing={bytes} />
        <TextField label="Hosts expected" path={at('hostsExpected')} writing={number} />
        <YesNoField label="Must be filtered" path={at('mustBeFiltered')} />
        <TextField
          label="Neighbours give up after"
          path={at('neighbourTimeoutUs')}
          writing={milliseconds}
          span={2}
        />
      </CellGrid>
      <FindingBoxes about={ref} />
      <StretchButton id={id} />
      <Places id={id} />
      <Section title="Protocols that must survive">
        <CheckList
          label="Protocols"
          path={at('protocols')}
          choices={protocols.map((value) => ({ value, label: protocolWords[value] }))}
          noneWords="none in particular"
        />
      </Section>
      <Section title={`Tunnels that carry it (${tunnels.length})`}>
        <ElementList of={tunnels.map((tunnel) => ({ collection: 'tunnels', id: tunnel }))} empty="None." />
      </Section>
      <Section title="Hosts" open={false}>
        <ElementList
          of={(network.hostsBySegment.get(id) ?? []).map((host) => ({ collection: 'devices', id: host }))}
          empty="No host says that it is on it."
        />
      </Section>
      <Demands id={id} />
      <Section title="Notes" open={segment.notes !== undefined}>
        <CellGrid>
          <LongTextField label="Notes" path={at('notes')} />
        </CellGrid>
      </Section>
    </>
  );
}

/** Opens the assistant that joins one more site. */
function StretchButton({ id }: { readonly id: string }) {
  const { change } = useSearchValues();
  const editable = useEditable();
  if (!editable) return null;
  return <Button onClick={() => change({ stretch: id })}>Stretch to another site…</Button>;
}

/** The sites where a segment lands, with VLAN and subnets at each. */
function Places({ id }: { readonly id: string }) {
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  const commit = useCommit();
  const segment = design.segments[id]!;
  const here = Object.keys(segment.sites).filter((site) => Object.hasOwn(design.sites, site));
  const elsewhere = Object.entries(design.sites).filter(([site]) => !Object.hasOwn(segment.sites, site));
  const vlans = new Set(Object.values(segment.sites).flatMap(({ vlan }) => vlan ?? []));
  return (
    <Section title={`Where it lands (${here.length})`}>
      {here.map((site) => {
        const name = design.sites[site]!.name;
        return (
          <div key={site} role="group" aria-label={name} className="flex flex-col gap-4">
            <div className="flex items-center gap-8">
              <span className="min-w-0 flex-1">
                <ElementLink to={{ collection: 'sites', id: site }} />
              </span>
              {editable && (
                <Button
                  kind="quiet"
                  small
                  iconOnly
                  aria-label={`No longer lands at ${name}`}
                  icon={<Icon name="cross" size={14} />}
                  onClick={() =>
                    commit(`Places of ${segment.name}`, patchAt(['segments', id, 'sites', site], null))
                  }
                />
              )}
            </div>
            <CellGrid columns="minmax(0, 1fr) minmax(0, 2fr)">
              <TextField
                label="VLAN"
                place={name}
                path={['segments', id, 'sites', site, 'vlan']}
                writing={number}
              />
              <TextField
                label="Subnets"
                place={name}
                path={['segments', id, 'sites', site, 'subnets']}
                writing={textList}
              />
            </CellGrid>
          </div>
        );
      })}
      {editable && elsewhere.length > 0 && (
        <CellGrid>
          <SelectCell
            label="Lands also at"
            value=""
            placeholder="choose a site"
            options={elsewhere.map(([site, { name }]) => ({ value: site, label: name }))}
            onChange={(site) =>
              commit(
                `Places of ${segment.name}`,
                // Where all sites agree on a VLAN, the next one most likely has it too.
                patchAt(['segments', id, 'sites', site], vlans.size === 1 ? { vlan: [...vlans][0] } : {}),
              )
            }
          />
        </CellGrid>
      )}
    </Section>
  );
}

/** What a segment has to carry between its sites. */
function Demands({ id }: { readonly id: string }) {
  const open = useOpenDesign();
  const design = useOpenState((state) => state.document);
  const editable = useEditable();
  const demands = Object.entries(design.demands).filter(([, demand]) => demand.segment === id);
  const places = Object.keys(design.segments[id]?.sites ?? {}).length;
  const add = (): void => {
    const done = perform(open, placeDemand(design, id, newEntryId));
    if (!done.ok) showToast({ tone: 'failed', text: done.why });
  };
  return (
    <Section
      title={`Demands (${demands.length})`}
      beside={
        editable &&
        places > 1 && (
          <AddButton subject="a demand" onClick={add}>
            Add
          </AddButton>
        )
      }
    >
      <ElementList
        of={demands.map(([demand]) => ({ collection: 'demands', id: demand }))}
        empty={places < 2 ? 'It has to land at two sites first.' : 'None stated.'}
      />
    </Section>
  );
}
