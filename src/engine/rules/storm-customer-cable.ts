import { removalPatch } from '../flood/removal-patch.ts';
import { segmentPathFacts } from './carried-segments.ts';
import { defineRule } from './define-rule.ts';
import type { Fix } from './finding.ts';
import { placesOf } from './places.ts';
import { cableName, cutFix } from './storm-cuts.ts';
import { cablesBetweenSites, stormBody, stormOfFault, stormsOf } from './storm-faults.ts';
import { ofSegments, stormSeen, stormWhy } from './storm-words.ts';
import { sentenceStart } from './sentence-start.ts';
import { counted, listed } from './wording.ts';

export const stormCustomerCable = defineRule({
  id: 'storm-customer-cable',
  title: 'A segment crosses between two sites in one way only',
  severity: 'blocking',
  looksAt: segmentPathFacts,
  why: `The customer’s own connection and the overlay close a ring, and spanning tree does not see the whole of it: BPDUs end at the gateways, so that no switch blocks. ${stormWhy}`,
  seen: stormSeen,
  sources: [
    { document: 'RFC 4762', clause: 'section 4.4' },
    { document: 'RFC 4664', clause: 'section 3.4.1' },
  ],
  messages: {
    beside: {
      words: 'broadcast storm',
      sentence: (v: { readonly cable: string; readonly segments: string }) =>
        `${sentenceStart(v.cable)} closes a loop${v.segments} beside the overlay`,
    },
    around: {
      words: 'broadcast storm',
      sentence: (v: { readonly cables: string; readonly segments: string }) =>
        `${sentenceStart(v.cables)} between sites close a loop${v.segments}`,
    },
  },
  check: (network) => {
    const { design } = network;
    return stormsOf(network, 'customer-cable').map((storm) => {
      const cables = cablesBetweenSites(network, storm);
      const words = { segments: ofSegments(design, storm) };
      const body = stormBody(
        storm,
        cables.map((id) => ({ collection: 'links', id })),
      );
      const [only] = cables;
      const link = design.links[only!]!;
      if (cables.length > 1 || link.kind !== 'cable')
        return {
          message: 'around' as const,
          values: { cables: counted(cables.length, 'cable', 'cables'), ...words },
          ...body,
        };
      const places = placesOf(design, link.a.device, link.b.device);
      return {
        message: 'beside' as const,
        values: { cable: link.name ?? `a cable ${places.a} – ${places.b}`, ...words },
        ...body,
      };
    });
  },
  fixes: (fault, network) => {
    const storm = stormOfFault(network, 'customer-cable', fault);
    const cables = cablesBetweenSites(network, storm);
    const names = listed(cables.map((id) => cableName(network, id)));
    const unplug: Fix = {
      id: 'unplug',
      label: cables.length === 1 ? `Remove ${names}` : `Remove ${counted(cables.length, 'cable', 'cables')}`,
      sentence: `Removes ${names}; between the sites the overlay alone carries the segment.`,
      patch: removalPatch(network, { cables }),
    };
    const cut = cutFix(network, storm);
    return cut.label === unplug.label ? [unplug] : [unplug, cut];
  },
});
