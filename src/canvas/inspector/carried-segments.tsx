import { useMemo } from 'react';
import { SegmentSwatch } from '../../components/segment-swatch.tsx';
import type { CordSegment } from '../../drawing/parts/drawing-facts.ts';
import { paletteOf } from '../../drawing/theme/segment-tokens.ts';
import { tunnelSegments } from '../../engine/flood/tunnel-segments.ts';
import type { Entry } from '../../engine/model/design.ts';
import { indexNetwork } from '../../engine/network/index-network.ts';
import type { Network } from '../../engine/network/network.ts';
import { useOpenState } from '../../workspace/open-design-context.tsx';
import { ElementLink } from './element-link.tsx';

/** The index of the open design. */
export const useNetwork = (): Network => {
  const document = useOpenState((state) => state.document);
  return useMemo(() => indexNetwork(document), [document]);
};

/** The segments that a tunnel carries, as its cord wears them. */
export const useCarried = (tunnel: string): readonly CordSegment[] => {
  const network = useNetwork();
  return useMemo(
    () =>
      (tunnelSegments(network).get(tunnel) ?? []).flatMap((id) => {
        const letter = network.design.segments[id]?.letter;
        return letter === undefined ? [] : [{ id, letter, palette: paletteOf(letter) }];
      }),
    [network, tunnel],
  );
};

/** A segment by its letter, a piece of its cord and its name; the name selects it. */
export function SegmentName({ id, segment }: { readonly id: string; readonly segment: Entry<'segments'> }) {
  return (
    <span className="flex min-w-0 items-center gap-6">
      <SegmentSwatch letter={segment.letter} squarePx={15} cordPx={14} />
      <span className="min-w-0">
        <ElementLink to={{ collection: 'segments', id }}>{segment.name}</ElementLink>
      </span>
    </span>
  );
}
