import type { SheetGeometry } from '../geometry.ts';
import type { DrawingFacts } from '../parts/drawing-facts.ts';

/** What a drawing says, without the addresses of hosts and the subnets of segments. */
export const factsWithoutAddresses = (facts: DrawingFacts): DrawingFacts => ({
  ...facts,
  segments: facts.segments.map((segment) => ({ ...segment, subnet: '' })),
  devices: Object.fromEntries(
    Object.entries(facts.devices).map(([id, device]) => {
      const { second, ...rest } = device;
      return [id, second === undefined || device.kind === 'host' ? rest : device];
    }),
  ),
});

/** A drawing without the addresses beside its rings and landings. */
export const geometryWithoutAddresses = (geometry: SheetGeometry): SheetGeometry => ({
  ...geometry,
  rings: geometry.rings.map((ring) => ({ ...ring, label: { ...ring.label, text: '' } })),
  cables: geometry.cables.map(({ label: _label, ...cable }) => cable),
});
