import { useState } from 'react';
import type { ElementRef } from '../../engine/model/design.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { InspectorContext, type InspectorTools } from './inspector-context.ts';
import { TunnelPanel } from './tunnel-panel.tsx';

export type InspectorProps = Omit<InspectorTools, 'sections'>;

/** What is selected, with every field of it; the design itself where nothing is. */
export function Inspector({ onConnect, onShowFinding, standing }: InspectorProps) {
  const selection = useOpenState((state) => state.selection);
  const [sections] = useState(() => new Map<string, boolean>());
  const only = selection.length === 1 ? selection[0] : undefined;
  return (
    <InspectorContext value={{ onConnect, onShowFinding, standing, sections }}>
      <aside
        aria-label="Inspector"
        className="w-304 shrink-0 overflow-x-hidden overflow-y-auto border-l-1.5 border-ink bg-panel"
      >
        <div className="flex flex-col gap-12 p-14">
          {only !== undefined && (
            <ElementPanel key={`${only.collection}/${only.id}/${only.port ?? ''}`} of={only} />
          )}
        </div>
      </aside>
    </InspectorContext>
  );
}

function ElementPanel({ of: ref }: { readonly of: ElementRef }) {
  if (ref.collection === 'tunnels') return <TunnelPanel id={ref.id} />;
  return null;
}
