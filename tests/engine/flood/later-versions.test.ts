import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { floodGraph } from '#engine/flood/flood-graph.ts';
import { findStorms } from '#engine/flood/find-storms.ts';
import { segmentReach } from '#engine/flood/segment-reach.ts';
import { tunnelSegments } from '#engine/flood/tunnel-segments.ts';
import type { Design } from '#engine/model/design.ts';
import { parseDesign } from '#engine/model/parse-design.ts';
import { tunnelStates } from '#engine/network/can-come-up.ts';
import { indexNetwork } from '#engine/network/index-network.ts';
import type { Network, PortGroup } from '#engine/network/network.ts';
import { generatedDesign } from '../../support/generated-designs.ts';
import { generatedEdit } from '../../support/generated-edits.ts';

const fresh = (design: Design): Design => {
  const parsed = parseDesign(structuredClone(design));
  if (!parsed.ok) throw new Error(JSON.stringify(parsed.problems));
  return parsed.value;
};

/** What joins devices, bundles by their first cable: which numbers they have is a matter of history. */
const cabling = ({ portGroupsByDevice, bundles, bundleByCable }: Network): unknown => {
  const name = (bundle: number): string => bundles[bundle]!.cables[0]!;
  const groups = new Map(
    [...portGroupsByDevice].map(([device, list]) => [
      device,
      list.map((group) => ({
        ...group,
        bundles: group.bundles.map(({ bundle, end }) => `${name(bundle)} ${end}`),
      })),
    ]),
  );
  const isListed = (group: PortGroup): boolean =>
    portGroupsByDevice.get(group.device)![group.index] === group;
  return {
    groups,
    bundles: bundles
      .map(({ index, cables, alive, a, b }, number) => ({
        cables,
        alive,
        ends: [a, b].map(({ device, index: group }) => `${device} ${group}`),
        isListed: number === index && isListed(a) && isListed(b),
      }))
      .sort((one, other) => (one.cables[0]! < other.cables[0]! ? -1 : 1)),
    byCable: new Map([...bundleByCable].map(([cable, bundle]) => [cable, name(bundle.index)])),
  };
};

/** All that the engine knows of who is joined to whom and who floods to whom. */
const known = (design: Design): unknown => {
  const network = indexNetwork(design);
  const {
    design: _design,
    portGroupsByDevice: _groups,
    bundles,
    bundleByCable: _byCable,
    firstTunnelElement,
    ...lists
  } = network;
  const { nodeCount, element, direction, tags, into, edgeStart, edgeTo, edgeClasses, hasFilters } =
    floodGraph(network);
  const elements = [...element].map(
    (one) => bundles[one]?.cables[0] ?? network.tunnelIds[one - firstTunnelElement],
  );
  return {
    lists,
    cabling: cabling(network),
    graph: { nodeCount, elements, direction, tags, into, edgeStart, edgeTo, edgeClasses, hasFilters },
    states: tunnelStates(network),
    storms: findStorms(floodGraph(network)),
    carried: tunnelSegments(network),
    reaches: Object.keys(design.segments).map((segment) => segmentReach(network, segment)),
  };
};

describe('a later version of a design', () => {
  it('is indexed and flooded as if there had been none before', { timeout: 240_000 }, () => {
    fc.assert(
      fc.property(
        generatedDesign,
        fc.array(fc.record({ edit: generatedEdit, isLookedAt: fc.boolean() }), {
          minLength: 12,
          maxLength: 12,
        }),
        (start, edits) => {
          let design = start;
          known(design);
          for (const { edit, isLookedAt } of edits) {
            design = edit(design);
            if (isLookedAt) expect(known(design)).toEqual(known(fresh(design)));
            else indexNetwork(design);
          }
          expect(known(design)).toEqual(known(fresh(design)));
        },
      ),
      { numRuns: 80, endOnFailure: true },
    );
  });
});
