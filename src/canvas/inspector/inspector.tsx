import { useState, type ReactNode } from 'react';
import type { Collection, ElementRef } from '../../engine/model/design.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { AssociationPanel } from './association-panel.tsx';
import { DemandPanel } from './demand-panel.tsx';
import { DesignPanel } from './design-panel.tsx';
import { DevicePanel } from './device-panel.tsx';
import { EndpointPanel } from './endpoint-panel.tsx';
import { ForwarderPanel } from './forwarder-panel.tsx';
import { InspectorContext, type InspectorTools } from './inspector-context.ts';
import { LinkPanel } from './link-panel.tsx';
import { NotePanel } from './note-panel.tsx';
import { PortPanel } from './port-panel.tsx';
import { ProfilePanel } from './profile-panel.tsx';
import { SegmentPanel } from './segment-panel.tsx';
import { SeveralPanel } from './several-panel.tsx';
import { SitePanel } from './site-panel.tsx';
import { TransportPanel } from './transport-panel.tsx';
import { TunnelPanel } from './tunnel-panel.tsx';

export type InspectorProps = Omit<InspectorTools, 'sections'>;

const panels = {
  sites: SitePanel,
  devices: DevicePanel,
  transports: TransportPanel,
  links: LinkPanel,
  endpoints: EndpointPanel,
  associations: AssociationPanel,
  tunnels: TunnelPanel,
  forwarders: ForwarderPanel,
  segments: SegmentPanel,
  demands: DemandPanel,
  profiles: ProfilePanel,
  notes: NotePanel,
} satisfies Record<Collection, (props: { readonly id: string }) => ReactNode>;

/** What is selected, with every field of it; the design itself where nothing is. */
export function Inspector({ onConnect, onShowFinding, standing, menuOf, footOf }: InspectorProps) {
  const selection = useOpenState((state) => state.selection);
  const [sections] = useState(() => new Map<string, boolean>());
  const [first] = selection;
  return (
    <InspectorContext value={{ onConnect, onShowFinding, standing, menuOf, sections }}>
      <aside
        aria-label="Inspector"
        className="h-full w-304 shrink-0 overflow-x-hidden overflow-y-auto border-l-1.5 border-ink bg-panel"
      >
        <div className="flex flex-col gap-12 p-14">
          {first === undefined ? (
            <DesignPanel />
          ) : selection.length === 1 ? (
            // A key of its own: what somebody had begun to type goes with the element it was for.
            <ElementPanel key={`${first.collection}/${first.id}/${first.port ?? ''}`} of={first} />
          ) : (
            <SeveralPanel of={selection} />
          )}
          {first !== undefined && selection.length === 1 && footOf?.(first)}
        </div>
      </aside>
    </InspectorContext>
  );
}

function ElementPanel({ of: ref }: { readonly of: ElementRef }) {
  const hasPort = useOpenState(
    ({ document }) =>
      ref.collection === 'devices' &&
      ref.port !== undefined &&
      document.devices[ref.id]?.ports[ref.port] !== undefined,
  );
  if (hasPort && ref.port !== undefined) return <PortPanel id={ref.id} port={ref.port} member={ref.member} />;
  const Panel = panels[ref.collection];
  return <Panel id={ref.id} />;
}
